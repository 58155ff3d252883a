// The reader's page: widgets and what joins them. All numbers come from the pure functions of the other reader files.
"use strict";

// A data file calls this with the numbers of its atmosphere.
const readerReceive = (data) => readerReceive.taken.set(data.atmosphere, data);
readerReceive.taken = new Map();

(() => {
  const { fixed, short, spaced } = readerNumbers;
  const { csvOf, readingOf } = readerReading;
  const { linesOf, remarksOf, spokenOf, titleOf } = readerWords;
  const { copied, delayed, factsOf, pairOf, pinRow } = readerWidgets;
  const { RANGES, hashOf, numberOf, stateOf } = readerState;

  const ADDRESS_DELAY_MS = 200;
  const SPEECH_DELAY_MS = 400;
  const CURVE = { left: 10, width: 220, top: 6, height: 60 }; // in the spectrum's own units
  const DEEP_TWILIGHT_DEG = -6;

  const byId = (id) => document.getElementById(id);
  const constants = JSON.parse(byId("reader-constants").textContent);
  const airs = constants.atmospheres.map(({ name }) => name);
  const spaces = Object.keys(constants.spaces);

  // Data and skies

  const opened = new Map();

  const loaded = (name) =>
    new Promise((resolve, reject) => {
      const script = document.createElement("script");
      script.src = constants.atmospheres.find((entry) => entry.name === name).data;
      script.onload = () => resolve(readerData.opened(readerReceive.taken.get(name)));
      script.onerror = () => reject(new Error(`the numbers of ${name} are missing: ${script.src}`));
      document.head.append(script);
    });

  const airOf = (name) => {
    if (!opened.has(name)) {
      opened.set(name, loaded(name));
    }
    return opened.get(name);
  };

  // State: what is chosen, the sky that belongs to it, and what has to be drawn again

  let { state, faults } = stateOf(location.hash, airs, spaces);
  let sky = null;
  let hover = null;
  let pinned = [];

  const shown = () => hover ?? state;
  const displayWhite = () => (state.exposure === "card" ? sky.light.card[1] / 2 ** state.stops : state.white);
  const reading = () => readingOf(sky, shown().elevation, shown().azimuth, constants);

  // Numbers of the direction

  const bearing = () => {
    const found = state.placed && place();
    return found ? (found.azimuth + shown().azimuth + 360) % 360 : null;
  };

  const drawNumbers = () => {
    const found = reading();
    const lines = linesOf(found, { white: displayWhite(), space: state.space, bearing: bearing() }, constants);
    byId("read-title").textContent = titleOf(shown()) + (hover ? ", under the pointer" : "");
    byId("numbers").replaceChildren(...lines.map((line) => pairOf(line, byId("said"))));
    drawSpectrum(found);
    speak();
  };

  const drawSpectrum = (found) => {
    const nm = sky.air.wavelengths;
    const values = readerSky.spectrumOf(sky, found.view_elevation_deg, found.relative_azimuth_deg, found.XYZ, constants.spectrum_to_XYZ);
    const [most, span] = [Math.max(...values), nm.at(-1) - nm[0]];
    const points = values.map((value, i) => {
      const x = CURVE.left + (CURVE.width * (nm[i] - nm[0])) / span;
      return `${fixed(x, 1)} ${fixed(CURVE.top + CURVE.height * (1 - value / most), 1)}`;
    });
    byId("curve").setAttribute("d", `M${points.join("L")}`);
    const peak = nm[values.indexOf(most)];
    byId("spectrum-title").textContent = `Sketch of the spectrum from ${nm[0]} to ${nm.at(-1)} nm; it is highest near ${peak} nm`;
  };

  const speak = delayed(() => {
    byId("spoken").textContent = spokenOf(shown(), reading());
  }, SPEECH_DELAY_MS);

  const drawLight = () => {
    const { air } = constants.atmospheres.find(({ name }) => name === state.air);
    byId("now").textContent = `Sun at ${spaced(short(sky.sun, 2))}°, geometric. ${state.air}: ${air}.`;
    byId("twilight").hidden = sky.sun > DEEP_TWILIGHT_DEG;
    byId("light").replaceChildren(...factsOf(sky.light));
  };

  // Pins

  const readPins = async () => {
    const found = await Promise.all(
      state.pins.map(async (pin) => readingOf(readerSky.skyOf(await airOf(pin.air), pin.sun), pin.elevation, pin.azimuth, constants)),
    );
    pinned = found;
    drawPins();
  };

  const unpin = (i) => {
    update({ pins: state.pins.filter((_, other) => other !== i) });
    (state.pins.length > 0 ? byId("copy-list") : byId("pin")).focus();
  };

  const drawPins = () => {
    byId("no-pins").hidden = pinned.length > 0;
    byId("pins-shown").hidden = pinned.length === 0;
    byId("pins").replaceChildren(
      ...pinned.map((found, i) =>
        pinRow(found, pinned[0], state.pins[i].azimuth, i + 1, {
          Show: () => update({ ...state.pins[i], placed: false }),
          Copy: () => copied(csvOf([found], constants), byId("list-said")),
          Unpin: () => unpin(i),
        }),
      ),
    );
  };

  // Sun by place and time

  const place = () => {
    const time = readerSun.universalTime(state.date, state.time, state.utc);
    return Number.isNaN(time) ? null : readerSun.sunPosition(time, state.latitude, state.longitude);
  };

  const sunFromPlace = () => {
    const found = state.placed && place();
    if (!state.placed) {
      return "";
    }
    if (!found) {
      return "No such date or time.";
    }
    if (found.elevation < RANGES.sun.low) {
      return `The sun stands ${short(-found.elevation, 1)}° below the horizon; skies are computed down to −12°, so the last one stays.`;
    }
    state.sun = Number(fixed(found.elevation, 2));
    return `Sun at ${spaced(fixed(found.elevation, 2))}°, ${fixed(found.azimuth, 1)}° from north.`;
  };

  // What belongs together when something changes

  const inputs = ["sun", "elevation", "azimuth", "stops", "white", "latitude", "longitude", "utc"];

  const fillControls = () => {
    for (const name of inputs) {
      const input = byId(name);
      input.setCustomValidity("");
      if (document.activeElement !== input || numberOf(name, input.value) !== state[name]) {
        input.value = short(state[name], RANGES[name].decimals);
      }
    }
    for (const name of ["air", "picture", "exposure", "space", "date", "time"]) {
      byId(name).value = state[name];
    }
    byId("sun-slider").value = state.sun;
    byId("sun-slider").setAttribute("aria-valuetext", `${short(state.sun, 2)}°`);
    byId("placed").checked = state.placed;
    byId("place").hidden = !state.placed;
    byId("stops").parentElement.hidden = state.exposure !== "card";
    byId("white").parentElement.hidden = state.exposure !== "fixed";
  };

  const writeAddress = delayed(() => history.replaceState(null, "", `#${hashOf(state)}`), ADDRESS_DELAY_MS);

  const drawScope = readerScope.drawer(constants);
  let due = 0;
  let newest = 0;

  const draw = () => {
    due = 0;
    const { picture, elevation, azimuth } = state;
    drawScope({ sky, picture, white: displayWhite(), elevation, azimuth });
    drawNumbers();
  };

  const tellFault = (text) => {
    byId("fault").textContent = text;
    byId("fault").hidden = text === "";
  };

  // Whatever changes state comes through here; the picture is drawn once before the screen is.
  const update = async (changes) => {
    newest += 1;
    const turn = newest;
    Object.assign(state, changes);
    hover = null;
    byId("place-said").textContent = sunFromPlace();
    fillControls();
    writeAddress();
    let air = null;
    try {
      air = await airOf(state.air);
    } catch (error) {
      tellFault(error.message);
      return;
    }
    if (turn !== newest) {
      return; // a later change is on its way
    }
    if (sky?.air !== air || sky.sun !== state.sun) {
      sky = readerSky.skyOf(air, state.sun);
      drawLight();
    }
    due ||= requestAnimationFrame(draw);
    if ("pins" in changes) {
      await readPins();
    }
  };

  // Widgets

  const followNumber = (name) => {
    const input = byId(name);
    input.addEventListener("input", () => {
      const value = numberOf(name, input.value);
      const { low, high } = RANGES[name];
      input.setCustomValidity(Number.isNaN(value) ? `accepted is ${short(low, 4)} to ${short(high, 4)}` : "");
      if (!Number.isNaN(value)) {
        update({ [name]: value, ...(name === "sun" ? { placed: false } : {}) });
      }
    });
    input.addEventListener("change", () => {
      input.reportValidity();
    });
  };

  const followChoice = (name, changes = (value) => ({ [name]: value })) => {
    byId(name).addEventListener("input", (event) => update(changes(event.target.value)));
  };

  const followSlider = () => {
    const slider = byId("sun-slider");
    slider.addEventListener("input", () => update({ sun: Number(slider.value), placed: false }));
    slider.addEventListener("keydown", (event) => {
      const step = { PageUp: 5, PageDown: -5 }[event.key];
      if (step) {
        event.preventDefault();
        update({ sun: Math.min(Math.max(state.sun + step, RANGES.sun.low), RANGES.sun.high), placed: false });
      }
    });
  };

  const followScope = () =>
    readerScope.follow({
      choose: update,
      hover: (direction) => {
        if (direction || hover) {
          hover = direction;
          drawNumbers();
        }
      },
      step: (up, right) => update(readerScope.moved(state, up, right)),
    });

  const followButtons = () => {
    const pressed = (id, task) => byId(id).addEventListener("click", task);
    pressed("pin", async () => {
      if (state.pins.length >= readerState.MOST_PINS) {
        byId("said").textContent = `No more than ${readerState.MOST_PINS} pins.`;
        return;
      }
      const { air, sun, elevation, azimuth } = state;
      await update({ pins: [...state.pins, { air, sun, elevation, azimuth }] });
      byId("said").textContent = `Pinned, ${state.pins.length} in the list below.`;
    });
    pressed("copy-row", () => copied(csvOf([readingOf(sky, state.elevation, state.azimuth, constants)], constants), byId("said")));
    pressed("copy-link", () => copied(`${location.href.split("#")[0]}#${hashOf(state)}`, byId("said")));
    pressed("copy-list", () => copied(csvOf(pinned, constants, remarksOf(pinned, constants)), byId("list-said")));
    pressed("clear-pins", () => {
      update({ pins: [] });
      byId("pin").focus();
    });
  };

  const tellFaults = () => tellFault(faults.length > 0 ? `Not understood in the address, and left out: ${faults.join(", ")}.` : "");

  const followAddress = () => {
    window.addEventListener("hashchange", () => {
      if (location.hash.slice(1) !== hashOf(state)) {
        ({ state, faults } = stateOf(location.hash, airs, spaces));
        tellFaults();
        update({ pins: state.pins });
      }
    });
  };

  byId("settings").addEventListener("submit", (event) => event.preventDefault());
  inputs.forEach(followNumber);
  for (const name of ["air", "picture", "exposure", "space", "date", "time"]) {
    followChoice(name);
  }
  byId("placed").addEventListener("input", (event) => update({ placed: event.target.checked }));
  followSlider();
  followScope();
  followButtons();
  followAddress();
  byId("reader").hidden = false;
  tellFaults();
  update({ pins: state.pins });
})();
