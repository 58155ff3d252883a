// The sky between the directions and suns that were computed. Pure functions; Node loads this file too.
// Data come from skychart/export/reader_data.py; which parts are kept and why, skychart/charts/reader.py tells.
"use strict";

const readerSky = (() => {
  const DEGREE = Math.PI / 180;
  const TABLE_ROWS = 181; // half degrees of view elevation
  const TABLE_COLUMNS = 181; // whole degrees of azimuth
  const PEAK_FINE = 512; // steps of the root of the distance in a picture

  // Bytes of base64 as integers: seven bits a byte, the lowest first, then zigzag.
  const integers = (base64) => {
    const bytes = atob(base64);
    const found = [];
    let [value, scale] = [0, 1];
    for (let i = 0; i < bytes.length; i += 1) {
      const byte = bytes.charCodeAt(i);
      value += (byte & 127) * scale;
      scale *= 128;
      if (byte < 128) {
        found.push(value % 2 ? -(value + 1) / 2 : value / 2);
        [value, scale] = [0, 1];
      }
    }
    return found;
  };

  // Sums along one axis of an array that is kept flat: what differences were taken of.
  const summed = (values, shape, axis) => {
    const stride = shape.slice(axis + 1).reduce((product, count) => product * count, 1);
    const block = stride * shape[axis];
    for (let i = 0; i < values.length; i += 1) {
      if (i % block >= stride) {
        values[i] += values[i - stride];
      }
    }
  };

  // The arrays of a data file by name, { shape, values }.
  const unpacked = (data) => {
    const all = integers(data.packed);
    let start = 0;
    return Object.fromEntries(
      data.arrays.map(({ name, shape, step }) => {
        const count = shape.reduce((product, length) => product * length, 1);
        const values = Float64Array.from(all.slice(start, start + count));
        start += count;
        for (let axis = shape.length - 2; axis >= 0; axis -= 1) {
          summed(values, shape, axis);
        }
        return [name, { shape, values: values.map((value) => value * step) }];
      }),
    );
  };

  // Solves a system of equations by elimination; `right` holds rows of right-hand sides. Both are overwritten.
  const solved = (system, right) => {
    const count = system.length;
    for (let pivot = 0; pivot < count; pivot += 1) {
      let best = pivot;
      for (let row = pivot + 1; row < count; row += 1) {
        best = Math.abs(system[row][pivot]) > Math.abs(system[best][pivot]) ? row : best;
      }
      [system[pivot], system[best]] = [system[best], system[pivot]];
      [right[pivot], right[best]] = [right[best], right[pivot]];
      for (let row = 0; row < count; row += 1) {
        const factor = row === pivot ? 0 : system[row][pivot] / system[pivot][pivot];
        if (factor !== 0) {
          system[row] = system[row].map((value, i) => value - factor * system[pivot][i]);
          right[row] = right[row].map((value, i) => value - factor * right[pivot][i]);
        }
      }
    }
    return right.map((row, i) => row.map((value) => value / system[i][i]));
  };

  // Cubic spline through `nodes`, natural or with zero slope at both ends, as a function of a place that gives the weight
  // of every node. Source: Press et al., Numerical Recipes, 3rd edition (2007), equations 3.3.3 to 3.3.7.
  const spline = (nodes, flatEnds = false) => {
    const count = nodes.length;
    const step = nodes.slice(1).map((node, i) => node - nodes[i]);
    const zeros = () => Array.from({ length: count }, () => new Array(count).fill(0));
    const [system, right] = [zeros(), zeros()];
    for (let i = 0; i < count; i += 1) {
      system[i][i] = 1;
      if (i > 0 && i < count - 1) {
        [system[i][i - 1], system[i][i], system[i][i + 1]] = [step[i - 1] / 6, (step[i - 1] + step[i]) / 3, step[i] / 6];
        [right[i][i - 1], right[i][i], right[i][i + 1]] = [1 / step[i - 1], -1 / step[i - 1] - 1 / step[i], 1 / step[i]];
      }
    }
    if (flatEnds) {
      const [last, end] = [count - 1, step[count - 2]];
      [system[0][0], system[0][1], right[0][0], right[0][1]] = [step[0] / 3, step[0] / 6, -1 / step[0], 1 / step[0]];
      [system[last][last - 1], system[last][last]] = [end / 6, end / 3];
      [right[last][last - 1], right[last][last]] = [1 / end, -1 / end];
    }
    const curvature = solved(system, right);
    return (place) => {
      let cell = count - 2;
      while (cell > 0 && place < nodes[cell]) {
        cell -= 1;
      }
      const h = step[cell];
      const a = (nodes[cell + 1] - place) / h;
      const b = 1 - a;
      const [bendA, bendB] = [((a ** 3 - a) * h * h) / 6, ((b ** 3 - b) * h * h) / 6];
      const weights = Float64Array.from(curvature[cell], (value, i) => value * bendA + curvature[cell + 1][i] * bendB);
      weights[cell] += a;
      weights[cell + 1] += b;
      return weights;
    };
  };

  // Weighted sum over the first axis of an array.
  const blended = ({ shape, values }, weights) => {
    const size = values.length / shape[0];
    const found = new Float64Array(size);
    weights.forEach((weight, i) => {
      for (let k = 0; k < size && weight !== 0; k += 1) {
        found[k] += weight * values[i * size + k];
      }
    });
    return { shape: shape.slice(1), values: found };
  };

  // Weights of a straight line between the two nodes about a place; the ends are held.
  const linear = (nodes, place) => {
    const weights = new Float64Array(nodes.length);
    const held = Math.min(Math.max(place, nodes[0]), nodes.at(-1));
    let cell = nodes.length - 2;
    while (cell > 0 && held < nodes[cell]) {
      cell -= 1;
    }
    weights[cell + 1] = (held - nodes[cell]) / (nodes[cell + 1] - nodes[cell]);
    weights[cell] += 1 - weights[cell + 1];
    return weights;
  };

  // A data file made ready: arrays unpacked, a spline for each axis.
  const opened = (data) => {
    const reach = data.peak_distances.at(-1);
    const roots = (distances) => distances.map((distance) => Math.sqrt(distance / reach));
    return {
      ...data,
      arrays: unpacked(data),
      reach,
      bySun: spline(data.suns),
      byLight: spline(data.light_suns),
      byLit: spline(data.light_suns.slice(-data.arrays.find(({ name }) => name === "beam_log").shape[0])),
      byView: spline(data.views),
      byAzimuth: spline(data.azimuths, true),
      byAzimuthOdd: spline(data.azimuths), // U changes its sign at 0 and 180
      byPeak: spline(roots(data.peak_distances), true),
      bySide: spline(roots(data.side_distances), true),
    };
  };

  const dot = (weights, nodes) => nodes.reduce((sum, value, i) => sum + value * weights[i], 0);

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

  // Smooth logarithms on half degrees of elevation and whole degrees of azimuth, (row, column, XYZ).
  const tableOf = (sky) => {
    const { air, smooth } = sky;
    const [, columns] = smooth.shape;
    air.upward ??= Array.from({ length: TABLE_ROWS }, (_, i) => air.byView(i / 2));
    air.sideways ??= Array.from({ length: TABLE_COLUMNS }, (_, j) => air.byAzimuth(j));
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
        table[at] = x;
        table[at + 1] = y;
        table[at + 2] = z;
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
    for (let step = 0; step < length; step += 1) {
      const place = Math.min(step / PEAK_FINE, 1);
      table.set(blended(sky.peak, air.byPeak(place)).values, step * 3);
      const weights = air.bySide(place);
      for (let arm = 0; arm < 3; arm += 1) {
        const values = sky.sides.values.subarray(arm * count * 3, (arm + 1) * count * 3);
        table.set(blended({ shape: [count, 3], values }, weights).values, ((arm + 1) * length + step) * 3);
      }
    }
    return table;
  };

  // Pixels of a picture: index, elevation and azimuth [°] of every pixel that shows sky on the side of azimuths 0 to 180,
  // and the index of its mirror image.
  const allSkyPixels = (size) => {
    const [places, half, radius] = [[], size / 2, size / 2 - 1];
    for (let y = 0; y < size; y += 1) {
      for (let x = half; x < size; x += 1) {
        const [right, down] = [x + 0.5 - half, y + 0.5 - half];
        const elevation = 90 * (1 - Math.hypot(right, down) / radius);
        if (elevation >= 0) {
          places.push([y * size + x, y * size + size - 1 - x, elevation, Math.atan2(right, down) / DEGREE]);
        }
      }
    }
    return prepared(places, size, size);
  };

  const panoramaPixels = (width) => {
    const [places, height] = [[], width / 4];
    for (let y = 0; y < height; y += 1) {
      for (let x = width / 2; x < width; x += 1) {
        const azimuth = ((x + 0.5) / width - 0.5) * 360;
        places.push([y * width + x, y * width + width - 1 - x, 90 * (1 - (y + 0.5) / height), azimuth]);
      }
    }
    return prepared(places, width, height);
  };

  // Everything about a pixel that does not depend on the sun.
  const prepared = (places, width, height) => {
    const count = places.length;
    const pixels = { width, height, count, at: new Int32Array(2 * count), cell: new Int32Array(count) };
    pixels.part = new Float32Array(2 * count);
    pixels.toward = new Float32Array(3 * count); // unit vector: toward the sun's azimuth, to the right, up
    places.forEach(([index, mirror, elevation, azimuth], p) => {
      pixels.at.set([index, mirror], 2 * p);
      const [row, column] = [2 * elevation, azimuth];
      const [i, j] = [Math.min(Math.trunc(row), TABLE_ROWS - 2), Math.min(Math.trunc(column), TABLE_COLUMNS - 2)];
      pixels.cell[p] = (i * TABLE_COLUMNS + j) * 3;
      pixels.part.set([row - i, column - j], 2 * p);
      const [view, turn] = [elevation * DEGREE, azimuth * DEGREE];
      pixels.toward.set([Math.cos(view) * Math.cos(turn), Math.cos(view) * Math.sin(turn), Math.sin(view)], 3 * p);
    });
    return pixels;
  };

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
        found[k + i] = Math.exp(
          found[k + i] + a * table[j] + b * table[j + 3] + c * table[j + below] + d * table[j + below + 3],
        );
      }
    }
    return found;
  };

  return { allSkyPixels, directionOf, folded, integers, lightOf, opened, panoramaPixels, pictureOf, skyOf, spectrumOf, spline };
})();

if (typeof module !== "undefined") {
  module.exports = readerSky;
}
