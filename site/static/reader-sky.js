// The sky between the directions and suns that were computed. Pure functions; Node loads this file too.
// Which parts of it are kept, and why: skychart/charts/reader.py.
"use strict";

const readerSky = (() => {
  const { blended, dot, linear, solved } = typeof module !== "undefined" ? require("./reader-data.js") : readerData;
  const DEGREE = Math.PI / 180;

  // Light on the ground and the card: sky and sun on the level [lx], beam on a plane that faces the sun [lx], white card
  // [cd/m²], all as XYZ, and the sun's apparent elevation [°].
  const lightOf = (air, sun) => {
    const { sky_log: skyLog, beam_log: beamLog } = air.arrays;
    const apparent = dot(air.byLight(sun), air.apparent);
    const sky = [...blended(skyLog, air.bySun(sun)).values].map(Math.exp);
    const lit = sun >= air.light_suns.at(-beamLog.shape[0]);
    const beam = lit ? [...blended(beamLog, air.byLit(sun)).values].map(Math.exp) : [0, 0, 0];
    const level = beam.map((value) => value * Math.max(Math.sin(apparent * DEGREE), 0));
    return { apparent, sky, beam, level, card: sky.map((value, i) => (value + level[i]) / Math.PI) };
  };

  // The sky of one atmosphere under one sun [°].
  const skyOf = (air, sun) => {
    const weights = air.bySun(sun);
    return {
      air,
      sun,
      light: lightOf(air, sun),
      smooth: blended(air.arrays.smooth_log, weights),
      peak: blended(air.arrays.peak_log, weights),
      sides: blended(air.arrays.sides_log, linear(air.suns, sun)),
      polarised: blended(air.arrays.polarised, weights),
      spectra: blended(air.arrays.spectra_log, weights),
    };
  };

  // Distance from the sun [°], and the cosine of the angle at the sun from straight up.
  const distanceAndSide = (apparent, elevation, azimuth) => {
    const [sun, view, turn] = [apparent * DEGREE, elevation * DEGREE, azimuth * DEGREE];
    const across = Math.cos(view) * Math.sin(turn);
    const upward = Math.sin(view) * Math.cos(sun) - Math.cos(view) * Math.sin(sun) * Math.cos(turn);
    const forward = Math.sin(view) * Math.sin(sun) + Math.cos(view) * Math.cos(sun) * Math.cos(turn);
    const sideways = Math.hypot(across, upward);
    return [Math.atan2(sideways, forward) / DEGREE, sideways > 0 ? upward / sideways : 0];
  };

  const placeOf = (air, distance) => Math.sqrt(Math.min(distance / air.reach, 1));

  // Logarithms of what the sun's surroundings add to the smooth sky: the peak by its own, and with the sides.
  const around = (sky, elevation, azimuth) => {
    const [distance, side] = distanceAndSide(sky.light.apparent, elevation, azimuth);
    const place = placeOf(sky.air, distance);
    const peak = blended(sky.peak, sky.air.byPeak(place)).values;
    const weights = sky.air.bySide(place);
    const count = weights.length;
    const sides = { shape: [3 * count, 3], values: sky.sides.values };
    const vertical = side * side;
    const of = (arm, share) => Array.from({ length: 3 * count }, (_, i) => (Math.trunc(i / count) === arm ? share * weights[i % count] : 0));
    const [chosen, beside] = [of(side > 0 ? 0 : 2, vertical), of(1, 1 - vertical)];
    const rest = blended(sides, chosen.map((weight, i) => weight + beside[i])).values;
    return { peak, rest };
  };

  const folded = (azimuth) => {
    const turned = Math.abs(azimuth) % 360;
    return Math.min(turned, 360 - turned);
  };

  // One direction [°]: XYZ [cd/m²] and Q/I, U/I of the luminance; the azimuth is folded into 0 to 180.
  const directionOf = (sky, elevation, azimuth) => {
    const { air } = sky;
    const turn = folded(azimuth);
    const [upward, sideways] = [air.byView(elevation), air.byAzimuth(turn)];
    const smooth = blended(blended(sky.smooth, upward), sideways).values;
    const { peak, rest } = around(sky, elevation, turn);
    const XYZ = [...smooth].map((value, i) => Math.exp(value + peak[i] + rest[i]));
    const fainter = Math.exp(-peak[1] - rest[1]);
    const across = blended(sky.polarised, upward);
    const [q, u] = [blended(across, sideways).values[0], blended(across, air.byAzimuthOdd(turn)).values[1]];
    return { XYZ, polarised: [q * fainter, u * fainter] };
  };

  // Relative spectral radiance at the data's wavelengths: between the spectra of the few directions that were kept,
  // bent by a parabola of its logarithm until it has the tristimulus values read. `matching` (wavelength, XYZ).
  const spectrumOf = (sky, elevation, azimuth, XYZ, matching) => {
    const { air } = sky;
    const turn = folded(azimuth);
    const rows = [...new Set(air.directions.map(([view]) => view))].sort((a, b) => a - b);
    const weights = air.directions.map(() => 0);
    linear(rows, elevation).forEach((share, row) => {
      const members = air.directions.flatMap(([view, at], i) => (view === rows[row] ? [{ at, i }] : []));
      members.sort((a, b) => a.at - b.at);
      const along = members.length > 1 ? linear(members.map(({ at }) => at), turn) : [1];
      members.forEach(({ i }, k) => {
        weights[i] += share * along[k];
      });
    });
    const base = blended(sky.spectra, weights).values;
    const ends = [air.wavelengths[0], air.wavelengths.at(-1)];
    const powers = air.wavelengths.map((nm) => {
      const x = (2 * nm - ends[0] - ends[1]) / (ends[1] - ends[0]);
      return [1, x, x * x];
    });
    let bend = [0, 0, 0];
    const shape = () => powers.map((power, k) => Math.exp(base[k] + dot(bend, power)));
    for (let round = 0; round < 12; round += 1) {
      const values = shape();
      const found = [0, 1, 2].map((i) => dot(matching.map((row) => row[i]), values));
      if (round === 0) {
        bend[0] = Math.log(XYZ[1] / found[1]);
      } else {
        const slopes = [0, 1, 2].map((i) =>
          [0, 1, 2].map((j) => values.reduce((sum, value, k) => sum + matching[k][i] * value * powers[k][j], 0)),
        );
        const step = solved(slopes, XYZ.map((value, i) => [value - found[i]])).flat();
        const longest = Math.max(1, ...step.map(Math.abs));
        bend = bend.map((value, i) => value + step[i] / longest);
      }
    }
    return shape();
  };

  return { directionOf, folded, lightOf, skyOf, spectrumOf };
})();

if (typeof module !== "undefined") {
  module.exports = readerSky;
}
