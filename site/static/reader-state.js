// What the reader shows, as the address carries it. Pure functions; Node loads this file too.
"use strict";

const readerState = (() => {
  const inNode = typeof module !== "undefined";
  const { short } = inNode ? require("./reader-numbers.js") : readerNumbers;
  const { universalTime } = inNode ? require("./reader-sun.js") : readerSun;

  const RANGES = {
    sun: { low: -12, high: 90, decimals: 2 },
    elevation: { low: 0, high: 90, decimals: 2 },
    azimuth: { low: -180, high: 180, decimals: 2 },
    stops: { low: -12, high: 12, decimals: 2 },
    white: { low: 1e-4, high: 1e6, decimals: 6 },
    latitude: { low: -90, high: 90, decimals: 4 },
    longitude: { low: -180, high: 180, decimals: 4 },
    utc: { low: -14, high: 14, decimals: 2 },
  };
  const PICTURES = ["all-sky", "panorama"];
  const MOST_PINS = 50;

  // What the page opens with; `atmospheres` and `spaces` are lists of names.
  const initial = (atmospheres) => ({
    air: atmospheres[0],
    sun: 30,
    elevation: 45,
    azimuth: 90,
    picture: PICTURES[0],
    exposure: "card",
    stops: 0,
    white: 10000,
    space: "srgb",
    placed: false,
    latitude: 50,
    longitude: 10,
    date: "2026-06-21",
    time: "18:00",
    utc: 1,
    pins: [],
  });

  // A typed number if it is one within its range, or NaN.
  const numberOf = (name, text) => {
    const { low, high, decimals } = RANGES[name];
    const value = String(text).trim() === "" ? NaN : Number(text);
    return value >= low && value <= high ? Number(short(value, decimals)) : NaN;
  };

  const pinOf = (text, atmospheres) => {
    const [air, ...angles] = text.split(",");
    const [sun, elevation, azimuth] = ["sun", "elevation", "azimuth"].map((name, i) => numberOf(name, angles[i] ?? ""));
    const whole = angles.length === 3 && atmospheres.includes(air) && ![sun, elevation, azimuth].some(Number.isNaN);
    return whole ? { air, sun, elevation, azimuth } : null;
  };

  // The part of an address after "#".
  const hashOf = (state) => {
    const write = (name) => short(state[name], RANGES[name].decimals);
    const parts = [
      ["air", state.air],
      ["sun", write("sun")],
      ["elevation", write("elevation")],
      ["azimuth", write("azimuth")],
      ["picture", state.picture],
      ["exposure", state.exposure],
      state.exposure === "card" ? ["stops", write("stops")] : ["white", write("white")],
      ["space", state.space],
    ];
    if (state.placed) {
      parts.push(["latitude", write("latitude")], ["longitude", write("longitude")], ["date", state.date]);
      parts.push(["time", state.time], ["utc", write("utc")]);
    }
    if (state.pins.length > 0) {
      const pins = state.pins.map((pin) =>
        [pin.air, ...["sun", "elevation", "azimuth"].map((name) => short(pin[name], RANGES[name].decimals))].join(","),
      );
      parts.push(["pins", pins.join(";")]);
    }
    return parts.map(([key, value]) => `${key}=${value}`).join("&");
  };

  // The state that an address asks for, and the parts of it that are no state of this page, as they were written.
  const stateOf = (hash, atmospheres, spaces) => {
    const state = initial(atmospheres);
    const faults = [];
    const choices = { air: atmospheres, picture: PICTURES, exposure: ["card", "fixed"], space: spaces };
    const place = {};
    for (const part of hash.replace(/^#/, "").split("&").filter(Boolean)) {
      const [key, value = ""] = part.split("=").map(decoded);
      if (Object.hasOwn(RANGES, key) && !Number.isNaN(numberOf(key, value))) {
        state[key] = numberOf(key, value);
      } else if (Object.hasOwn(choices, key) && choices[key].includes(value)) {
        state[key] = value;
      } else if (key === "date" || key === "time") {
        place[key] = value;
      } else if (key === "pins") {
        const texts = value.split(";");
        const pins = texts.map((text) => pinOf(text, atmospheres));
        state.pins = pins.filter(Boolean).slice(0, MOST_PINS);
        faults.push(...texts.filter((_, i) => !pins[i] || i >= MOST_PINS).map((text) => `pins=${text}`));
      } else {
        faults.push(`${key}=${value}`);
      }
    }
    if ("date" in place || "time" in place) {
      const { date = "", time = "" } = place;
      if (Number.isNaN(universalTime(date, time, state.utc))) {
        faults.push(`date=${date}&time=${time}`);
      } else {
        Object.assign(state, { date, time, placed: true });
      }
    }
    return { state, faults };
  };

  const decoded = (text) => {
    try {
      return decodeURIComponent(text);
    } catch {
      return text;
    }
  };

  return { MOST_PINS, RANGES, hashOf, initial, numberOf, stateOf };
})();

if (typeof module !== "undefined") {
  module.exports = readerState;
}
