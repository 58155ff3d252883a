// One direction of one sky as the numbers that `skychart read` gives, and lists of them as CSV. Pure functions; Node loads
// this file too.
"use strict";

const readerReading = (() => {
  const inNode = typeof module !== "undefined";
  const numbers = inNode ? require("./reader-numbers.js") : readerNumbers;
  const colour = inNode ? require("./reader-colour.js") : readerColour;
  const directions = inNode ? require("./reader-sky.js") : readerSky;

  // The keys and units of `skychart read --json`, with the card that `srgb_hex` and differences refer to.
  const readingOf = (sky, elevation, azimuth, constants) => {
    const { XYZ, polarised } = directions.directionOf(sky, elevation, azimuth);
    const [cct, duv] = colour.cctDuv(XYZ, constants);
    const [degree, angle] = colour.polarisation(polarised);
    const names = Object.keys(constants.spaces);
    const rgb = Object.fromEntries(names.map((name) => [name, colour.rgb(XYZ, name, constants)]));
    return {
      atmosphere: sky.air.atmosphere,
      solar_elevation_deg: sky.sun,
      view_elevation_deg: elevation,
      relative_azimuth_deg: directions.folded(azimuth),
      luminance_cd_m2: XYZ[1],
      ev100: colour.ev100(XYZ[1]),
      XYZ,
      xy: colour.xy(XYZ),
      uv_prime: colour.uvPrime(XYZ),
      cct_k: cct,
      duv,
      rgb,
      in_gamut: Object.fromEntries(names.map((name) => [name, colour.inGamut(rgb[name])])),
      polarisation_degree: degree,
      polarisation_angle_deg: angle,
      srgb_hex: colour.hex(XYZ, sky.light.card[1], constants),
      card_XYZ: sky.light.card,
    };
  };

  // The first gamut that holds the colour, by its title, or "none".
  const smallestGamut = (reading, constants) => {
    const name = constants.gamuts.find((gamut) => reading.in_gamut[gamut]);
    return name ? constants.spaces[name].title : "none";
  };

  // Stops above another reading.
  const stopsAbove = (reading, other) => Math.log2(reading.luminance_cd_m2 / other.luminance_cd_m2);

  // CIEDE2000 from another reading; both are seen beside the level white card of the other one's light.
  const differenceFrom = (reading, other) => {
    const white = other.card_XYZ;
    return colour.deltaE2000(colour.lab(other.XYZ, white), colour.lab(reading.XYZ, white));
  };

  const vector = (key, letters, of, write) => [...letters].map((letter, i) => [`${key}${letter}`, (reading) => write(of(reading)[i])]);
  const three = (value) => numbers.significant(value, 3);
  const four = (value) => numbers.fixed(value, 4);

  // Columns of the CSV: key and cell, named as in the tables of the other pages.
  const columnsOf = (constants) => [
    ["atmosphere", (reading) => reading.atmosphere],
    ["solar_elevation_deg", (reading) => numbers.short(reading.solar_elevation_deg, 3)],
    ["view_elevation_deg", (reading) => numbers.short(reading.view_elevation_deg, 3)],
    ["relative_azimuth_deg", (reading) => numbers.short(reading.relative_azimuth_deg, 3)],
    ["luminance_cd_m2", (reading) => three(reading.luminance_cd_m2)],
    ["ev100", (reading) => numbers.fixed(reading.ev100, 2)],
    ...vector("", "XYZ", (reading) => reading.XYZ, three),
    ...vector("", "xy", (reading) => reading.xy, four),
    ["u_prime", (reading) => four(reading.uv_prime[0])],
    ["v_prime", (reading) => four(reading.uv_prime[1])],
    ["cct_k", (reading) => numbers.kelvin(reading.cct_k)],
    ["duv", (reading) => four(reading.duv)],
    ...Object.keys(constants.spaces).flatMap((name) => vector(`${name}_`, "rgb", (reading) => reading.rgb[name], three)),
    ["smallest_gamut", (reading) => smallestGamut(reading, constants)],
    ["polarisation_degree", (reading) => numbers.fixed(reading.polarisation_degree, 3)],
    ["polarisation_angle_deg", (reading) => numbers.fixed(reading.polarisation_angle_deg, 1)],
    ["srgb_hex", (reading) => reading.srgb_hex],
  ];

  // Readings as CSV; with `remarks`, a comment line each before, and what relates every reading to the first one.
  const csvOf = (readings, constants, remarks = []) => {
    const columns = columnsOf(constants);
    if (remarks.length > 0) {
      columns.push(["stops_above_first", (reading) => numbers.fixed(stopsAbove(reading, readings[0]), 2)]);
      columns.push(["delta_e_2000_from_first", (reading) => numbers.fixed(differenceFrom(reading, readings[0]), 1)]);
    }
    const rows = [columns.map(([key]) => key), ...readings.map((reading) => columns.map(([, cell]) => cell(reading)))];
    return [...remarks.map((remark) => `# ${remark}\n`), ...rows.map(numbers.csvLine)].join("");
  };

  return { csvOf, differenceFrom, readingOf, smallestGamut, stopsAbove };
})();

if (typeof module !== "undefined") {
  module.exports = readerReading;
}
