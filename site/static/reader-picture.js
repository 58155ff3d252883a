// The whole sky as pixels. What does not depend on the sun is prepared once; a sun needs one table of the smooth sky and one
// of its surroundings. Pure functions; Node loads this file too.
"use strict";

const readerPicture = (() => {
  const { blended } = typeof module !== "undefined" ? require("./reader-data.js") : readerData;
  const DEGREE = Math.PI / 180;
  const TABLE_ROWS = 181; // half degrees of view elevation
  const TABLE_COLUMNS = 91; // every second degree of azimuth
  const PEAK_FINE = 512; // steps of the root of the distance from the sun

  // The smooth sky's light on half degrees of elevation and every second degree of azimuth, (row, column, XYZ).
  const tableOf = (sky) => {
    const { air, smooth } = sky;
    const [, columns] = smooth.shape;
    air.upward ??= Array.from({ length: TABLE_ROWS }, (_, i) => air.byView(i / 2));
    air.sideways ??= Array.from({ length: TABLE_COLUMNS }, (_, j) => air.byAzimuth(2 * j));
    const table = new Float32Array(TABLE_ROWS * TABLE_COLUMNS * 3);
    for (let i = 0; i < TABLE_ROWS; i += 1) {
      const row = blended(smooth, air.upward[i]).values;
      for (let j = 0; j < TABLE_COLUMNS; j += 1) {
        const weights = air.sideways[j];
        let [x, y, z] = [0, 0, 0];
        for (let k = 0; k < columns; k += 1) {
          x += weights[k] * row[3 * k];
          y += weights[k] * row[3 * k + 1];
          z += weights[k] * row[3 * k + 2];
        }
        const at = (i * TABLE_COLUMNS + j) * 3;
        table[at] = Math.exp(x);
        table[at + 1] = Math.exp(y);
        table[at + 2] = Math.exp(z);
      }
    }
    return table;
  };

  // The peak and its sides on equal steps of the root of the distance: four rows of PEAK_FINE + 2 times XYZ.
  const peakTableOf = (sky) => {
    const { air } = sky;
    const length = PEAK_FINE + 2;
    const table = new Float32Array(4 * length * 3);
    const count = sky.sides.shape[1];
    air.outward ??= Array.from({ length }, (_, step) => Math.min(step / PEAK_FINE, 1)).map((place) => [air.byPeak(place), air.bySide(place)]);
    for (let step = 0; step < length; step += 1) {
      const [peakWeights, weights] = air.outward[step];
      table.set(blended(sky.peak, peakWeights).values, step * 3);
      for (let arm = 0; arm < 3; arm += 1) {
        const values = sky.sides.values.subarray(arm * count * 3, (arm + 1) * count * 3);
        table.set(blended({ shape: [count, 3], values }, weights).values, ((arm + 1) * length + step) * 3);
      }
    }
    return table;
  };

  // Pixels that show sky on the side of azimuths 0 to 180, with all about them that does not depend on the sun: `at` index
  // and that of the mirror image, `cell` and `part` in the table, `toward` unit vector: to the sun's azimuth, right, up.
  // `directionAt` gives elevation and azimuth [°] of a place, in pixels right of the middle and down from the top.
  const prepared = (width, height, directionAt) => {
    const most = (width * height) / 2;
    const [at, cell, part] = [new Int32Array(2 * most), new Int32Array(most), new Float32Array(2 * most)];
    const toward = new Float32Array(3 * most);
    let count = 0;
    for (let y = 0; y < height; y += 1) {
      for (let x = width / 2; x < width; x += 1) {
        const { elevation, azimuth } = directionAt(x + 0.5 - width / 2, y + 0.5);
        if (elevation >= 0) {
          const [i, j] = [Math.min(Math.trunc(2 * elevation), TABLE_ROWS - 2), Math.min(Math.trunc(azimuth / 2), TABLE_COLUMNS - 2)];
          const [view, turn] = [elevation * DEGREE, azimuth * DEGREE];
          at[2 * count] = y * width + x;
          at[2 * count + 1] = y * width + width - 1 - x;
          cell[count] = (i * TABLE_COLUMNS + j) * 3;
          part[2 * count] = 2 * elevation - i;
          part[2 * count + 1] = azimuth / 2 - j;
          toward[3 * count] = Math.cos(view) * Math.cos(turn);
          toward[3 * count + 1] = Math.cos(view) * Math.sin(turn);
          toward[3 * count + 2] = Math.sin(view);
          count += 1;
        }
      }
    }
    const kept = [at.subarray(0, 2 * count), cell.subarray(0, count), part.subarray(0, 2 * count), toward.subarray(0, 3 * count)];
    return { width, height, count, at: kept[0], cell: kept[1], part: kept[2], toward: kept[3] };
  };

  // Zenith in the middle, horizon at the rim, equal steps of elevation; the sun's azimuth down.
  const allSkyPixels = (size) =>
    prepared(size, size, (right, top) => {
      const down = top - size / 2;
      return { elevation: 90 * (1 - Math.hypot(right, down) / (size / 2)), azimuth: Math.atan2(right, down) / DEGREE };
    });

  // Equal steps of azimuth and elevation; the sun's azimuth in the middle.
  const panoramaPixels = (width) =>
    prepared(width, width / 4, (right, top) => ({ elevation: 90 * (1 - (4 * top) / width), azimuth: (360 * right) / width }));

  // What peak and sides add to the logarithms of the pixels within their reach: (pixel, XYZ), the rest zero.
  const aroundPixels = (sky, { toward, count }) => {
    const [peaks, found] = [peakTableOf(sky), new Float32Array(3 * count)];
    const reach = sky.air.reach * DEGREE;
    const [cosSun, sinSun, near] = [Math.cos(sky.light.apparent * DEGREE), Math.sin(sky.light.apparent * DEGREE), Math.cos(reach)];
    const arm = (PEAK_FINE + 2) * 3;
    for (let p = 0, k = 0; p < count; p += 1, k += 3) {
      const forward = toward[k] * cosSun + toward[k + 2] * sinSun;
      if (forward > near) {
        const upward = toward[k + 2] * cosSun - toward[k] * sinSun;
        const aside = toward[k + 1] ** 2;
        const vertical = upward ** 2 / Math.max(aside + upward ** 2, 1e-12);
        const place = Math.sqrt(Math.atan2(Math.sqrt(aside + upward ** 2), forward) / reach) * PEAK_FINE;
        const [step, side] = [Math.trunc(place), upward > 0 ? arm : 3 * arm];
        const part = place - step;
        for (let i = step * 3; i < step * 3 + 3; i += 1) {
          const low = peaks[i] + vertical * peaks[side + i] + (1 - vertical) * peaks[2 * arm + i];
          const high = peaks[i + 3] + vertical * peaks[side + i + 3] + (1 - vertical) * peaks[2 * arm + i + 3];
          found[k + i - step * 3] = low + part * (high - low);
        }
      }
    }
    return found;
  };

  // XYZ [cd/m²] of every prepared pixel of a sky, (pixel, XYZ).
  const pictureOf = (sky, pixels) => {
    const { cell, part, count } = pixels;
    const [table, found] = [tableOf(sky), aroundPixels(sky, pixels)];
    const below = TABLE_COLUMNS * 3;
    for (let p = 0, k = 0; p < count; p += 1, k += 3) {
      const [s, t, at] = [part[2 * p], part[2 * p + 1], cell[p]];
      const [a, b, c, d] = [(1 - s) * (1 - t), (1 - s) * t, s * (1 - t), s * t];
      for (let i = 0; i < 3; i += 1) {
        const j = at + i;
        const light = a * table[j] + b * table[j + 3] + c * table[j + below] + d * table[j + below + 3];
        found[k + i] = found[k + i] === 0 ? light : light * Math.exp(found[k + i]);
      }
    }
    return found;
  };

  return { allSkyPixels, panoramaPixels, pictureOf };
})();

if (typeof module !== "undefined") {
  module.exports = readerPicture;
}
