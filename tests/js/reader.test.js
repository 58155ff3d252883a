// The reader's pure functions against the Python side's answers, which SKYCHART_CASES names a file of.
"use strict";

const assert = require("node:assert/strict");
const { readFileSync } = require("node:fs");
const path = require("node:path");
const { test } = require("node:test");

const scripts = path.join(__dirname, "..", "..", "templates", "static");
const load = (name) => require(path.join(scripts, `reader-${name}.js`));
const [numbers, colour, sun, data, sky, picture, reading, words, state] = [
  ...["numbers", "colour", "sun", "data", "sky", "picture", "reading", "words", "state"].map(load),
];
const cases = JSON.parse(readFileSync(process.env.SKYCHART_CASES, "utf8"));
const { constants } = cases;

const received = (script) => {
  let taken;
  new Function("readerReceive", script)((found) => (taken = found));
  return taken;
};
const air = data.opened(received(cases.sky.script));

const near = (found, expected, tolerance, of) => {
  const off = Math.abs(found - expected);
  assert.ok(off <= tolerance, `${of}: ${found}, expected ${expected}, off by ${off}`);
};
const relative = (found, expected, tolerance, of) => near(found / expected, 1, tolerance, of);

test("numbers are written as the tables write them", () => {
  assert.ok(cases.numbers.length > 200);
  for (const [value, fixed, significant, kelvin, spaced] of cases.numbers) {
    assert.equal(numbers.fixed(value, 3), fixed);
    assert.equal(numbers.significant(value, 4), significant);
    assert.equal(numbers.kelvin(value), kelvin);
    assert.equal(numbers.spaced(numbers.significant(value, 3)), spaced);
  }
});

test("what is no number is written as nothing, and read as a dash", () => {
  for (const write of [numbers.kelvin, (value) => numbers.fixed(value, 2), (value) => numbers.significant(value, 2)]) {
    assert.equal(write(NaN), "");
  }
  assert.equal(numbers.spaced(""), "—");
});

test("chromaticity, RGB, exposure value and codes equal the Python side's", () => {
  const { XYZ, white, xy, uv_prime, rgb, in_gamut, ev100, srgb_hex } = cases.colours;
  XYZ.forEach((values, i) => {
    colour.xy(values).forEach((value, k) => near(value, xy[i][k], 1e-9, "xy"));
    colour.uvPrime(values).forEach((value, k) => near(value, uv_prime[i][k], 1e-9, "u'v'"));
    near(colour.ev100(values[1]), ev100[i], 1e-9, "EV100");
    for (const space of Object.keys(rgb)) {
      const found = colour.rgb(values, space, constants);
      found.forEach((value, k) => near(value / values[1], rgb[space][i][k] / values[1], 1e-8, space));
      assert.equal(colour.inGamut(found), in_gamut[space][i]);
    }
    assert.equal(colour.hex(values, white[i], constants), srgb_hex[i]);
  });
});

test("colour temperature and Duv are the Python side's, and so is whether there are any", () => {
  let some = 0;
  cases.colours.XYZ.forEach((values, i) => {
    const [cct, duv] = colour.cctDuv(values, constants);
    const expected = cases.colours.cct_k[i];
    assert.equal(Number.isNaN(cct), expected === null, `${values}: ${cct} K, expected ${expected}`);
    if (expected !== null) {
      some += 1;
      near(1e6 / cct, 1e6 / expected, 0.01, "mired");
      near(duv, cases.colours.duv[i], 1e-6, "Duv");
    }
  });
  assert.ok(some > 50);
});

test("no light has no colour temperature", () => {
  assert.deepEqual(colour.cctDuv([0, 0, 0], constants), [NaN, NaN]);
});

test("CIEDE2000 gives Table 1 of Sharma, Wu & Dalal 2005", () => {
  for (const [first, second, expected] of cases.differences.published) {
    near(colour.deltaE2000(first, second), expected, 5e-5, "published");
    near(colour.deltaE2000(second, first), expected, 5e-5, "the other way round");
  }
});

test("CIEDE2000 of tristimulus values is the Python side's", () => {
  const { first, second, white, delta } = cases.differences.computed;
  first.forEach((values, i) => {
    near(colour.deltaE2000(colour.lab(values, white), colour.lab(second[i], white)), delta[i], 1e-6, "ΔE2000");
  });
});

test("degree and angle of polarisation are the Python side's; unpolarised light has no angle", () => {
  cases.polarisation.ratios.forEach((ratios, i) => {
    const [degree, angle] = colour.polarisation(ratios);
    near(degree, cases.polarisation.degree[i], 1e-12, "degree");
    near(angle, cases.polarisation.angle[i], 1e-9, "angle");
  });
  assert.deepEqual(colour.polarisation([0, 0]), [0, NaN]);
});

test("a painted pixel has the code of the pages, to one step, on both sides of the picture", () => {
  const { XYZ, white, bytes } = cases.painted;
  const at = Int32Array.from(XYZ.flatMap((_, i) => [i, XYZ.length + i]));
  const matrix = constants.spaces.srgb.from_xyz.map((row) => row.map((value) => value / white));
  const found = new Uint8ClampedArray(8 * XYZ.length);
  colour.painted(Float32Array.from(XYZ.flat()), at, matrix, found);
  bytes.forEach((code, i) => {
    code.forEach((byte, k) => near(found[4 * i + k], byte, 1, "byte"));
    assert.equal(found[4 * i + 3], 255);
    assert.deepEqual(found.slice(4 * (XYZ.length + i), 4 * (XYZ.length + i) + 4), found.slice(4 * i, 4 * i + 4));
  });
});

test("splines have the Python side's weights, inside and at the nodes, natural and with flat ends", () => {
  for (const { nodes, flat, points, weights } of cases.splines) {
    const weigh = data.spline(nodes, flat);
    points.forEach((point, i) => weigh(point).forEach((weight, k) => near(weight, weights[i][k], 1e-12, "weight")));
  }
});

test("packed integers and arrays come back", () => {
  const { integers, varints, array, bytes } = cases.packed;
  const base64 = (list) => Buffer.from(list).toString("base64");
  assert.deepEqual(data.integers(base64(varints)), integers);
  const shape = [4, 5, 6, 3];
  const file = { packed: base64(bytes), arrays: [{ name: "array", shape, step: 0.01 }] };
  const found = data.unpacked(file).array;
  assert.deepEqual(found.shape, shape);
  array.flat(3).forEach((value, i) => near(found.values[i], value, 0.005 + 1e-9, "value"));
});

test("the reader is the sky itself within 1 % and 0.001 in u'v' by day, close to the sun too, 3 % and 0.002 in twilight", () => {
  assert.equal(cases.sky.asked.length, 300);
  cases.sky.asked.forEach(([elevation, view, azimuth], i) => {
    const found = sky.directionOf(sky.skyOf(air, elevation), view, azimuth);
    const [most, shift] = elevation >= 0 ? [0.01, 0.001] : [0.03, 0.002];
    const of = `sun ${elevation}, view ${view}, azimuth ${azimuth}`;
    relative(found.XYZ[1], cases.sky.XYZ[i][1], most, of);
    const [u, v] = [0, 1].map((k) => colour.uvPrime(found.XYZ)[k] - colour.uvPrime(cases.sky.XYZ[i])[k]);
    near(Math.hypot(u, v), 0, shift, `u'v', ${of}`);
    found.polarised.forEach((value, k) => near(value, cases.sky.polarised[i][k], 0.01, `polarisation, ${of}`));
  });
});

test("card, beam and refraction are those of the sky", () => {
  let lit = 0;
  cases.sky.asked.forEach(([elevation], i) => {
    const light = sky.lightOf(air, elevation);
    relative(light.card[1], cases.sky.card[i][1], 0.01, `card, sun ${elevation}`);
    near(light.apparent, cases.sky.apparent[i], 0.01, "apparent elevation");
    if (cases.sky.beam[i][1] > 0) {
      lit += 1;
      relative(light.beam[1], cases.sky.beam[i][1], 0.005, `beam, sun ${elevation}`);
    } else {
      assert.deepEqual(light.beam, [0, 0, 0]);
    }
  });
  assert.ok(lit > 200);
});

test("left and right of the sun are alike, and an azimuth of 270° is one of 90°", () => {
  const found = sky.skyOf(air, 12);
  for (const azimuth of [-90, 270, -270, 450]) {
    assert.deepEqual(sky.directionOf(found, 45, azimuth), sky.directionOf(found, 45, 90));
  }
});

test("a spectrum has the tristimulus values read", () => {
  for (const [elevation, view, azimuth] of cases.sky.asked) {
    const found = sky.skyOf(air, elevation);
    const { XYZ } = sky.directionOf(found, view, azimuth);
    const spectrum = sky.spectrumOf(found, view, azimuth, XYZ, constants.spectrum_to_XYZ);
    assert.ok(spectrum.every((value) => value > 0));
    XYZ.forEach((value, k) => {
      const sum = spectrum.reduce((total, radiance, i) => total + radiance * constants.spectrum_to_XYZ[i][k], 0);
      near(sum / XYZ[1], value / XYZ[1], 1e-6, `sun ${elevation}, view ${view}, azimuth ${azimuth}`);
    });
  }
});

test("pixels of both pictures are what a reading says in the same direction", () => {
  const found = sky.skyOf(air, 20.3);
  const shapes = { all: picture.allSkyPixels(120), wide: picture.panoramaPixels(160) };
  for (const [name, pixels] of Object.entries(shapes)) {
    const XYZ = picture.pictureOf(found, pixels);
    assert.equal(XYZ.length, 3 * pixels.count);
    for (let p = 0; p < pixels.count; p += 7) {
      const [forward, right, up] = pixels.toward.slice(3 * p, 3 * p + 3);
      const [view, azimuth] = [Math.asin(Math.min(up, 1)), Math.atan2(right, forward)].map((angle) => (angle * 180) / Math.PI);
      const expected = sky.directionOf(found, view, azimuth).XYZ;
      relative(XYZ[3 * p + 1], expected[1], 0.01, `${name}, view ${view}, azimuth ${azimuth}`);
    }
  }
});

test("the all-sky picture has the sun's azimuth down and the panorama has it in the middle, mirrored about it", () => {
  const [all, wide] = [picture.allSkyPixels(100), picture.panoramaPixels(200)];
  for (const pixels of [all, wide]) {
    assert.equal(new Set(pixels.at).size, 2 * pixels.count, "no pixel twice");
    for (let p = 0; p < pixels.count; p += 11) {
      const [x, mirrored] = [pixels.at[2 * p] % pixels.width, pixels.at[2 * p + 1] % pixels.width];
      assert.equal(x + mirrored, pixels.width - 1);
    }
  }
  const lowest = Math.max(...all.at);
  const p = all.at.indexOf(lowest) >> 1;
  assert.ok(all.toward[3 * p] > 0.99, "toward the sun");
  assert.ok(wide.toward[0] > 0, "toward it in the middle");
  assert.ok(wide.toward[3 * (wide.width / 2 - 1)] < 0, "away from it at the edge");
});

test("a reading has the keys of `skychart read`, then those of the reader alone", () => {
  const keys = Object.keys(reading.readingOf(sky.skyOf(air, 12), 45, 90, constants));
  const fixed =
    "atmosphere solar_elevation_deg view_elevation_deg relative_azimuth_deg luminance_cd_m2 XYZ xy uv_prime cct_k duv " +
    "rgb srgb_hex in_gamut polarisation_degree polarisation_angle_deg";
  assert.deepEqual(keys.filter((key) => !["ev100", "card_XYZ"].includes(key)).sort(), fixed.split(" ").sort());
});

test("the list as CSV has remarks, a head, a row for each reading, and relates them to the first", () => {
  const readings = [45, 2].map((view) => reading.readingOf(sky.skyOf(air, 12), view, 90, constants));
  const lines = reading.csvOf(readings, constants, ["from a test, with a comma"]).split("\n");
  assert.equal(lines[0], "# from a test, with a comma");
  const rows = lines.slice(1, 4).map((line) => line.split(","));
  const [head, first, second] = rows;
  assert.equal(lines[4], "");
  assert.equal(head.length, first.length);
  assert.equal(first[head.indexOf("stops_above_first")], "0.00");
  assert.equal(first[head.indexOf("delta_e_2000_from_first")], "0.0");
  const [one, two] = [first, second].map((row) => Number(row[head.indexOf("luminance_cd_m2")]));
  near(Number(second[head.indexOf("stops_above_first")]), Math.log2(two / one), 0.02, "stops");
  const [row] = reading.csvOf([readings[0]], constants).split("\n").slice(1);
  assert.equal(`${row},0.00,0.0`, lines[2]);
});

test("the lines of a reading are its numbers, with RGB in the chosen space, also over display white", () => {
  const found = reading.readingOf(sky.skyOf(air, 12), 45, 90, constants);
  const lines = words.linesOf(found, { white: 2 * found.XYZ[1], space: "bt2020", bearing: null }, constants);
  const texts = Object.fromEntries(lines.map(([name, unit, ...values]) => [`${name} ${unit}`.trim(), values]));
  assert.equal(Object.keys(texts).length, lines.length, "no two lines have one name");
  relative(Number(texts["Luminance cd/m²"][0]), found.luminance_cd_m2, 0.005, "luminance");
  const [linear, shown] = ["BT.2020 linear", "BT.2020, display white 1"].map((name) => texts[name].map(Number));
  found.rgb.bt2020.forEach((value, i) => {
    relative(linear[i], value, 0.005, "linear");
    relative(shown[i], value / (2 * found.XYZ[1]), 0.005, "over display white");
  });
  assert.deepEqual(texts["sRGB code card white"], [found.srgb_hex]);
  assert.deepEqual(texts["sRGB code as shown"], [colour.hex(found.XYZ, 2 * found.XYZ[1], constants)]);
  const turned = words.linesOf(found, { white: 1, space: "srgb", bearing: 300.04 }, constants);
  assert.deepEqual(turned.at(-1), ["Bearing of the view", "° from north", "300.0"]);
  assert.equal(turned.length, lines.length + 1);
});

test("a direction is named with true minus, and spoken with its units", () => {
  const direction = { elevation: 2.5, azimuth: -90 };
  assert.equal(words.titleOf(direction), "2.5° up, −90° from the sun");
  const found = reading.readingOf(sky.skyOf(air, 12), 2.5, -90, constants);
  const spoken = words.spokenOf(direction, found);
  assert.ok(spoken.startsWith("2.5° up, −90° from the sun: "), spoken);
  assert.match(spoken, /: \d+ candela per square metre, exposure value \d+\.\d, x 0\.\d{3}, y 0\.\d{3}, #[0-9a-f]{6}$/);
});

test("a list tells the air of those atmospheres alone that are in it", () => {
  const atmospheres = ["clear", "hazy", "ridge"].map((name) => ({ name, air: `air of ${name}` }));
  const remarks = words.remarksOf([{ atmosphere: "ridge" }, { atmosphere: "clear" }], { version: "1", observer: "o", atmospheres });
  assert.deepEqual(remarks.filter((remark) => remark.includes("air of")), ["clear: air of clear", "ridge: air of ridge"]);
});

test("an address brings back the state it was made from", () => {
  const some = state.initial(["clear", "hazy"]);
  Object.assign(some, { air: "hazy", sun: -3.25, elevation: 12.5, azimuth: -170, picture: "panorama", space: "acescg" });
  Object.assign(some, { placed: true, latitude: -33.5, longitude: 151.2, date: "2031-01-02", time: "05:06", utc: 10 });
  Object.assign(some, { exposure: "fixed", white: 0.05 });
  some.pins = [
    { air: "clear", sun: 12, elevation: 45, azimuth: 90 },
    { air: "hazy", sun: -12, elevation: 0, azimuth: -0.5 },
  ];
  assert.deepEqual(state.stateOf(`#${state.hashOf(some)}`, ["clear", "hazy"], ["srgb", "acescg"]), { state: some, faults: [] });
  const encoded = encodeURIComponent(state.hashOf(some)).replaceAll("%3D", "=").replaceAll("%26", "&");
  assert.deepEqual(state.stateOf(encoded, ["clear", "hazy"], ["srgb", "acescg"]).state, some);
});

test("what an address gets wrong is left out and told", () => {
  const wrong = "air=smog&sun=99&elevation=&azimuth=x&picture=oval&date=2026-02-30&time=12:00&pins=clear,1,2;clear,1,2,3&__proto__=1";
  const { state: found, faults } = state.stateOf(`#${wrong}`, ["clear"], ["srgb"]);
  const expected = state.initial(["clear"]);
  expected.pins = [{ air: "clear", sun: 1, elevation: 2, azimuth: 3 }];
  assert.deepEqual(found, expected);
  assert.deepEqual(faults, [
    ...["air=smog", "sun=99", "elevation=", "azimuth=x", "picture=oval", "pins=clear,1,2", "__proto__=1"],
    "date=2026-02-30&time=12:00",
  ]);
});

test("times outside 1950 to 2050 and what is no date are not taken", () => {
  for (const [date, time, offset] of [
    ...[["1949-12-31", "12:00", 0], ["2051-01-01", "12:00", 0], ["2026-13-01", "12:00", 0], ["2026-04-31", "12:00", 0]],
    ...[["2026-04-30", "24:00", 0], ["2026-04-30", "12:60", 0], ["", "", 0], ["2026-04-30", "12:00", 15]],
  ]) {
    assert.ok(Number.isNaN(sun.universalTime(date, time, offset)), `${date} ${time} ${offset}`);
  }
  assert.equal(sun.universalTime("2026-04-30", "00:30", 5.5), Date.UTC(2026, 3, 29, 19, 0));
});

test("the sun of NREL/TP-560-34302's worked example, with its refraction, within 0.03°", () => {
  const time = sun.universalTime("2003-10-17", "12:30:30", -7);
  const { elevation, azimuth } = sun.sunPosition(time, 39.742476, -105.1786);
  // equation 42 of the report, 820 mbar and 11 °C
  const lift = ((820 / 1010) * (283 / (273 + 11)) * 1.02) / (60 * Math.tan(((elevation + 10.3 / (elevation + 5.11)) * Math.PI) / 180));
  near(90 - elevation - lift, 50.11162, 0.03, "zenith angle");
  near(azimuth, 194.34024, 0.03, "azimuth");
});

test("the sun where a general astronomy library has it, within 0.02°", (context) => {
  if (!process.env.SKYCHART_SUNS) {
    context.skip("no suns given");
    return;
  }
  const suns = JSON.parse(readFileSync(process.env.SKYCHART_SUNS, "utf8"));
  assert.equal(suns.length, 200);
  for (const { ms, latitude, longitude, elevation, azimuth } of suns) {
    const found = sun.sunPosition(ms, latitude, longitude);
    const across = ((found.azimuth - azimuth + 540) % 360 - 180) * Math.cos((elevation * Math.PI) / 180);
    near(Math.hypot(found.elevation - elevation, across), 0, 0.02, `${ms} at ${latitude}, ${longitude}`);
  }
});
