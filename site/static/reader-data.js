// Numbers of one atmosphere as its data file brings them, and what interpolates between them. Pure functions; Node loads
// this file too. The file's form: skychart/export/reader_data.py.
"use strict";

const readerData = (() => {
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

  return { blended, dot, integers, linear, opened, solved, spline, unpacked };
})();

if (typeof module !== "undefined") {
  module.exports = readerData;
}
