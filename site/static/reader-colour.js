// Colours as numbers: chromaticity, colour temperature, RGB, codes, differences. Pure functions; Node loads this file too.
// Matrices and the Planckian locus are not typed here: the page hands over those that the tables are made with, as
// `constants` = { spaces: { name: { title, from_xyz } }, locus_uv, locus_step_mired, d65_XYZ }.
"use strict";

const readerColour = (() => {
  const LOWEST_K = 1000;
  const HIGHEST_K = 100000;
  const LARGEST_DUV = 0.05;
  const REFLECTED_LIGHT_CONSTANT = 12.5; // cd s/(m² ISO), ISO 2720:1974, as most meters are set
  const GAMUT_ROUNDING = 1e-9;

  const applied = (matrix, [a, b, c]) => matrix.map((row) => row[0] * a + row[1] * b + row[2] * c);

  // CIE 1931 chromaticity (CIE 015:2018, 7.3).
  const xy = ([X, Y, Z]) => [X / (X + Y + Z), Y / (X + Y + Z)];

  // CIE 1976 chromaticity u'v' (CIE 015:2018, 8.1).
  const uvPrime = ([X, Y, Z]) => [(4 * X) / (X + 15 * Y + 3 * Z), (9 * Y) / (X + 15 * Y + 3 * Z)];

  // Exposure value at ISO 100 that a reflected-light meter reads.
  const ev100 = (luminance) => (luminance > 0 ? Math.log2((100 * luminance) / REFLECTED_LIGHT_CONSTANT) : NaN);

  // Linear components on the scale of Y, not clipped.
  const rgb = (XYZ, space, constants) => applied(constants.spaces[space].from_xyz, XYZ);

  // Only chromaticity counts: no component may be negative by more than rounding.
  const inGamut = (linear) => Math.min(...linear) >= -GAMUT_ROUNDING * Math.max(...linear.map(Math.abs));

  // Non-linear signal of sRGB and Display P3 (IEC 61966-2-1).
  const encoded = (linear) => (linear <= 0.0031308 ? 12.92 * linear : 1.055 * linear ** (1 / 2.4) - 0.055);

  // What a screen gets of linear components over those of display white: negative ones become 0, a colour brighter
  // than display white is scaled down whole, which keeps its hue.
  const onScreen = (linear) => {
    const positive = linear.map((channel) => Math.max(channel, 0));
    const over = Math.max(1, ...positive);
    return positive.map((channel) => encoded(channel / over));
  };

  // sRGB code; `white` [cd/m²] is shown as #ffffff.
  const hex = (XYZ, white, constants) => {
    const channels = onScreen(rgb(XYZ, "srgb", constants).map((channel) => channel / white));
    return `#${channels.map((channel) => Math.round(255 * channel).toString(16).padStart(2, "0")).join("")}`;
  };

  // The same as bytes, by the root of the linear component, where equal steps are fine enough in the dark too.
  const CODE_STEPS = 4096;
  const CODES = Uint8Array.from({ length: CODE_STEPS + 1 }, (_, i) => Math.round(255 * encoded(((i + 0.5) / CODE_STEPS) ** 2)));

  // Correlated colour temperature [K] and Duv, or NaN for both where the notion has no meaning: above 100 000 K, below
  // 1000 K, |Duv| above 0.05. Nearest point of the locus in CIE 1960 uv (Ohno 2013, doi:10.1080/15502724.2014.839020),
  // taken as a parabola through three points that are equally far apart in reciprocal temperature.
  const cctDuv = (XYZ, constants) => {
    const none = [NaN, NaN];
    const [u, v] = [uvPrime(XYZ)[0], (uvPrime(XYZ)[1] * 2) / 3];
    const locus = constants.locus_uv;
    const apart = locus.map(([lu, lv]) => (lu - u) ** 2 + (lv - v) ** 2);
    const nearest = apart.indexOf(Math.min(...apart));
    if (!(nearest >= 0 && Math.sqrt(apart[nearest]) < LARGEST_DUV + 0.01)) {
      return none;
    }
    const middle = Math.min(Math.max(nearest, 1), locus.length - 2);
    const [[bu, bv], [cu, cv], [du, dv]] = locus.slice(middle - 1, middle + 2);
    const [au, av, pu, pv] = [(du - bu) / 2, (dv - bv) / 2, (du + bu) / 2 - cu, (dv + bv) / 2 - cv];
    const at = (s) => [cu + s * (au + s * pu) - u, cv + s * (av + s * pv) - v, au + 2 * s * pu, av + 2 * s * pv];
    let s = 0;
    for (let step = 0; step < 3; step += 1) {
      const [ou, ov, tu, tv] = at(s);
      const slope = tu ** 2 + tv ** 2 + 2 * (pu * ou + pv * ov);
      s = Math.min(Math.max(s - (ou * tu + ov * tv) / slope, -2), 2);
    }
    const [ou, ov, tu, tv] = at(s);
    const duv = -Math.sign(tu * ov - tv * ou) * Math.hypot(ou, ov);
    const kelvins = 1e6 / (constants.locus_step_mired * (middle + 1 + s));
    const meaningful = kelvins <= HIGHEST_K && kelvins >= LOWEST_K && Math.abs(duv) <= LARGEST_DUV;
    return meaningful ? [kelvins, duv] : none;
  };

  // CIE 1976 L*a*b* (CIE 015:2018, 8.2) of a colour beside a white in the same unit.
  const lab = (XYZ, white) => {
    const [x, y, z] = XYZ.map((value, i) => {
      const ratio = value / white[i];
      return ratio > (6 / 29) ** 3 ? Math.cbrt(ratio) : (841 / 108) * ratio + 4 / 29;
    });
    return [116 * y - 16, 500 * (x - y), 200 * (y - z)];
  };

  // CIEDE2000 of two L*a*b* (ISO/CIE 11664-6:2014; steps as in Sharma, Wu, Dalal 2005, doi:10.1002/col.20070).
  const deltaE2000 = ([L1, a1, b1], [L2, a2, b2]) => {
    const [sin, cos] = [(degrees) => Math.sin((degrees * Math.PI) / 180), (degrees) => Math.cos((degrees * Math.PI) / 180)];
    const seventh = (chroma) => Math.sqrt(chroma ** 7 / (chroma ** 7 + 25 ** 7));
    const g = 0.5 * (1 - seventh((Math.hypot(a1, b1) + Math.hypot(a2, b2)) / 2));
    const hueOf = (a, b) => (a === 0 && b === 0 ? 0 : ((Math.atan2(b, a) * 180) / Math.PI + 360) % 360);
    const [p1, p2] = [(1 + g) * a1, (1 + g) * a2];
    const [C1, C2, h1, h2] = [Math.hypot(p1, b1), Math.hypot(p2, b2), hueOf(p1, b1), hueOf(p2, b2)];
    const grey = C1 * C2 === 0;
    const turn = h2 - h1;
    const dh = grey ? 0 : turn > 180 ? turn - 360 : turn < -180 ? turn + 360 : turn;
    const sum = h1 + h2;
    const h = grey ? sum : Math.abs(turn) <= 180 ? sum / 2 : sum < 360 ? (sum + 360) / 2 : (sum - 360) / 2;
    const [L, C] = [(L1 + L2) / 2, (C1 + C2) / 2];
    const t = 1 - 0.17 * cos(h - 30) + 0.24 * cos(2 * h) + 0.32 * cos(3 * h + 6) - 0.2 * cos(4 * h - 63);
    const light = (L2 - L1) / (1 + (0.015 * (L - 50) ** 2) / Math.sqrt(20 + (L - 50) ** 2));
    const chroma = (C2 - C1) / (1 + 0.045 * C);
    const hue = (2 * Math.sqrt(C1 * C2) * sin(dh / 2)) / (1 + 0.015 * C * t);
    const rotation = -sin(60 * Math.exp(-(((h - 275) / 25) ** 2))) * 2 * seventh(C);
    return Math.sqrt(light ** 2 + chroma ** 2 + hue ** 2 + rotation * chroma * hue);
  };

  // Screen bytes of many colours at once: `XYZ` (pixel, XYZ), written to the bytes of a picture at two pixels each, a place
  // and its mirror image. `matrix` takes XYZ to linear components over those of display white.
  const painted = (XYZ, at, matrix, bytes) => {
    const [[ra, rb, rc], [ga, gb, gc], [ba, bb, bc]] = matrix;
    for (let p = 0, k = 0; k < XYZ.length; p += 2, k += 3) {
      const [x, y, z] = [XYZ[k], XYZ[k + 1], XYZ[k + 2]];
      const r = Math.max(ra * x + rb * y + rc * z, 0);
      const g = Math.max(ga * x + gb * y + gc * z, 0);
      const b = Math.max(ba * x + bb * y + bc * z, 0);
      const scale = CODE_STEPS / Math.max(r, g, b, 1);
      const [pixel, mirror] = [4 * at[p], 4 * at[p + 1]];
      bytes[pixel] = bytes[mirror] = CODES[Math.sqrt(r * scale * CODE_STEPS) | 0];
      bytes[pixel + 1] = bytes[mirror + 1] = CODES[Math.sqrt(g * scale * CODE_STEPS) | 0];
      bytes[pixel + 2] = bytes[mirror + 2] = CODES[Math.sqrt(b * scale * CODE_STEPS) | 0];
      bytes[pixel + 3] = bytes[mirror + 3] = 255;
    }
  };

  // Degree of linear polarisation and angle of the electric vector from the horizontal [°] of Q/I and U/I.
  const polarisation = ([q, u]) => {
    const degree = Math.hypot(q, u);
    return [degree, degree > 0 ? (Math.atan2(u, q) * 90) / Math.PI : NaN];
  };

  return { cctDuv, deltaE2000, encoded, ev100, hex, inGamut, lab, onScreen, painted, polarisation, rgb, uvPrime, xy };
})();

if (typeof module !== "undefined") {
  module.exports = readerColour;
}
