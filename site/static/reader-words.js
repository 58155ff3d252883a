// What the reader says of a direction, in words and lines of numbers. Pure functions; Node loads this file too.
"use strict";

const readerWords = (() => {
  const inNode = typeof module !== "undefined";
  const { fixed, kelvin, short, significant, spaced } = inNode ? require("./reader-numbers.js") : readerNumbers;
  const { hex } = inNode ? require("./reader-colour.js") : readerColour;
  const { smallestGamut } = inNode ? require("./reader-reading.js") : readerReading;

  const three = (value) => significant(value, 3);
  const four = (value) => fixed(value, 4);

  const titleOf = ({ elevation, azimuth }) => `${spaced(short(elevation, 2))}° up, ${spaced(short(azimuth, 2))}° from the sun`;

  const spokenOf = (direction, found) =>
    `${titleOf(direction)}: ${three(found.luminance_cd_m2)} candela per square metre, ` +
    `exposure value ${fixed(found.ev100, 1)}, x ${fixed(found.xy[0], 3)}, y ${fixed(found.xy[1], 3)}, ${found.srgb_hex}`;

  // All lines of a reading: name, unit, plain texts. `white` is the display white [cd/m²], `space` the name of the RGB space,
  // `bearing` that of the view [° from north] or null where no place is given.
  const linesOf = (found, { white, space, bearing }, constants) => {
    const { title } = constants.spaces[space];
    return [
      ["Luminance", "cd/m²", three(found.luminance_cd_m2)],
      ["EV100", "", fixed(found.ev100, 2)],
      ["Above the white card", "stops", fixed(Math.log2(found.luminance_cd_m2 / found.card_XYZ[1]), 2)],
      ["X Y Z", "cd/m²", ...found.XYZ.map(three)],
      ["x y", "", ...found.xy.map(four)],
      ["u′ v′", "", ...found.uv_prime.map(four)],
      ["CCT", "K", kelvin(found.cct_k)],
      ["Duv", "", four(found.duv)],
      [`${title} linear`, "", ...found.rgb[space].map(three)],
      [`${title}, display white 1`, "", ...found.rgb[space].map((value) => three(value / white))],
      ["Smallest gamut", "", smallestGamut(found, constants)],
      ["sRGB code", "as shown", hex(found.XYZ, white, constants)],
      ["sRGB code", "card white", found.srgb_hex],
      ["Polarisation", "degree", fixed(found.polarisation_degree, 3)],
      ["Polarisation", "angle, °", fixed(found.polarisation_angle_deg, 1)],
      ...(bearing === null ? [] : [["Bearing of the view", "° from north", fixed(bearing, 1)]]),
    ];
  };

  // What a list of readings says of itself, a line each.
  const remarksOf = (readings, constants) => [
    "Sky-colour reference charts: reader",
    `skychart ${constants.version}; ${constants.observer}; interpolated, within 1 % by day and mostly 3 % in twilight`,
    ...constants.atmospheres.filter(({ name }) => readings.some((found) => found.atmosphere === name)).map(({ name, air }) => `${name}: ${air}`),
    "linear RGB is absolute: white at 1 cd/m2 is 1, 1, 1; srgb_hex has a level white card as display white",
    "stops and CIEDE2000 from the first reading, both beside a level white card in the first one's light",
  ];

  return { linesOf, remarksOf, spokenOf, titleOf };
})();

if (typeof module !== "undefined") {
  module.exports = readerWords;
}
