// The reader's page: widgets and what joins them. All numbers come from the pure functions of the other reader files.
"use strict";

// A data file calls this with the numbers of its atmosphere.
const readerReceive = (data) => readerReceive.taken.set(data.atmosphere, data);
readerReceive.taken = new Map();

(() => {
  const { fixed, kelvin, short, significant, spaced } = readerNumbers;
  const { csvOf, readingOf, smallestGamut } = readerReading;
  const { copied, delayed, factsOf, pairOf, pinRow } = readerWidgets;
  const { RANGES, hashOf, numberOf, stateOf } = readerState;

  const PIXELS = { "all-sky": () => readerPicture.allSkyPixels(480), panorama: () => readerPicture.panoramaPixels(720) };
  const ADDRESS_DELAY_MS = 200;
  const SPEECH_DELAY_MS = 400;
  const CURVE = { left: 10, width: 220, top: 6, height: 60 }; // in the spectrum's own units
  const DEEP_TWILIGHT_DEG = -6;
  const INK_THRESHOLD = 0.179; // relative luminance above which black reads better than white (WCAG 2.2)

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

  // Picture

  const canvas = byId("canvas");
  const wide =
    matchMedia("(color-gamut: p3)").matches &&
    canvas.getContext("2d", { colorSpace: "display-p3" })?.getContextAttributes?.().colorSpace === "display-p3";
  const screenSpace = wide ? "display-p3" : "srgb";
  const drawing = canvas.getContext("2d", { colorSpace: screenSpace });
  const prepared = {};
  const drawn = { sky: null, picture: "", XYZ: null, image: null };

  const drawPicture = () => {
    const { picture } = state;
    prepared[picture] ??= PIXELS[picture]();
    const pixels = prepared[picture];
    if (drawn.picture !== picture) {
      [canvas.width, canvas.height] = [pixels.width, pixels.height];
      drawn.image = drawing.createImageData(pixels.width, pixels.height, { colorSpace: screenSpace });
    }
    if (drawn.sky !== sky || drawn.picture !== picture) {
      drawn.XYZ = readerPicture.pictureOf(sky, pixels);
      Object.assign(drawn, { sky, picture });
    }
    const white = displayWhite();
    const matrix = constants.spaces[screenSpace].from_xyz.map((row) => row.map((value) => value / white));
    readerColour.painted(drawn.XYZ, pixels.at, matrix, drawn.image.data);
    drawing.putImageData(drawn.image, 0, 0);
  };

  // Where a direction lies in the marks' own units, and which direction a place in them is.
  const spotOf = (elevation, azimuth) => {
    if (state.picture === "panorama") {
      return [azimuth, 90 - elevation];
    }
    const [distance, turn] = [(100 * (90 - elevation)) / 90, (azimuth * Math.PI) / 180];
    return [distance * Math.sin(turn), distance * Math.cos(turn)];
  };

  const directionAt = (x, y) => {
    if (state.picture === "panorama") {
      return { elevation: 90 - y, azimuth: x };
    }
    return { elevation: 90 - 0.9 * Math.hypot(x, y), azimuth: (Math.atan2(x, y) * 180) / Math.PI };
  };

  const marks = () => byId(`marks-${state.picture}`);

  const inkOf = () => {
    const XYZ = readerSky.directionOf(sky, 60, 90).XYZ;
    const codes = readerColour.hex(XYZ, displayWhite(), constants).match(/\w\w/g);
    const linear = codes.map((code) => parseInt(code, 16) / 255).map((v) => (v <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4));
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2] > INK_THRESHOLD ? "dark" : "light";
  };

  const drawMarks = () => {
    for (const picture of Object.keys(PIXELS)) {
      byId(`marks-${picture}`).toggleAttribute("hidden", picture !== state.picture);
    }
    byId("scope").dataset.picture = state.picture;
    const ink = inkOf();
    for (const part of marks().querySelectorAll("[data-ink]")) {
      part.classList.toggle("dark", ink === "dark");
      part.classList.toggle("light", ink === "light");
    }
    const sun = marks().querySelector("[data-sun]");
    sun.setAttribute("transform", `translate(${spotOf(Math.max(sky.light.apparent, -9), 0)})`);
    marks().querySelector("[data-pointer]").setAttribute("transform", `translate(${spotOf(state.elevation, state.azimuth)})`);
    const space = constants.spaces[screenSpace].title;
    byId("scope-said").textContent = `Drawn in ${space}; display white ${spaced(significant(displayWhite(), 3))} cd/m².`;
  };

  // Numbers of the direction

  const linesOf = (found) => {
    const [three, four] = [(value) => significant(value, 3), (value) => fixed(value, 4)];
    const white = displayWhite();
    const { title } = constants.spaces[state.space];
    const bearing = state.placed && place() ? [["Bearing of the view", "° from north", fixed((place().azimuth + shown().azimuth + 360) % 360, 1)]] : [];
    return [
      ["Luminance", "cd/m²", three(found.luminance_cd_m2)],
      ["EV100", "", fixed(found.ev100, 2)],
      ["Above the white card", "stops", fixed(Math.log2(found.luminance_cd_m2 / found.card_XYZ[1]), 2)],
      ["X Y Z", "cd/m²", ...found.XYZ.map(three)],
      ["x y", "", ...found.xy.map(four)],
      ["u′ v′", "", ...found.uv_prime.map(four)],
      ["CCT", "K", kelvin(found.cct_k)],
      ["Duv", "", four(found.duv)],
      [`${title} linear`, "", ...found.rgb[state.space].map(three)],
      [`${title}, display white 1`, "", ...found.rgb[state.space].map((value) => three(value / white))],
      ["Smallest gamut", "", smallestGamut(found, constants)],
      ["sRGB code", "as shown", readerColour.hex(found.XYZ, white, constants)],
      ["sRGB code", "card white", found.srgb_hex],
      ["Polarisation", "degree", fixed(found.polarisation_degree, 3)],
      ["Polarisation", "angle, °", fixed(found.polarisation_angle_deg, 1)],
      ...bearing,
    ];
  };

  const titleOf = ({ elevation, azimuth }) => `${spaced(short(elevation, 2))}° up, ${spaced(short(azimuth, 2))}° from the sun`;

  const drawNumbers = () => {
    const found = reading();
    byId("read-title").textContent = titleOf(shown()) + (hover ? ", under the pointer" : "");
    byId("numbers").replaceChildren(...linesOf(found).map((line) => pairOf(line, byId("said"))));
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
    const found = reading();
    byId("spoken").textContent =
      `${titleOf(shown())}: ${significant(found.luminance_cd_m2, 3)} candela per square metre, ` +
      `exposure value ${fixed(found.ev100, 1)}, x ${fixed(found.xy[0], 3)}, y ${fixed(found.xy[1], 3)}, ${found.srgb_hex}`;
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

  const remarks = () => [
    "Sky-colour reference charts: reader",
    `skychart ${constants.version}; ${constants.observer}; interpolated, within 1 % by day and mostly 3 % in twilight`,
    ...constants.atmospheres.filter(({ name }) => pinned.some((found) => found.atmosphere === name)).map(({ name, air }) => `${name}: ${air}`),
    "linear RGB is absolute: white at 1 cd/m2 is 1, 1, 1; srgb_hex has a level white card as display white",
    "stops and CIEDE2000 from the first reading, both beside a level white card in the first one's light",
  ];

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

  let due = 0;
  let newest = 0;

  const draw = () => {
    due = 0;
    drawPicture();
    drawMarks();
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

  const turned = (azimuth) => (azimuth > 180 ? azimuth - 360 : azimuth < -180 ? azimuth + 360 : azimuth);
  const held = (elevation) => Math.min(Math.max(elevation, 0), 90);
  const tenth = (angle) => Number(fixed(angle, 1));

  const followPicture = () => {
    const scope = byId("scope");
    const at = (event) => {
      const point = new DOMPoint(event.clientX, event.clientY).matrixTransform(marks().getScreenCTM().inverse());
      return directionAt(point.x, point.y);
    };
    const within = ({ elevation, azimuth }) => elevation >= 0 && elevation <= 90 && Math.abs(azimuth) <= 180;
    const choose = (event) => {
      const { elevation, azimuth } = at(event);
      update({ elevation: tenth(held(elevation)), azimuth: tenth(Math.min(Math.max(azimuth, -180), 180)) });
    };
    scope.addEventListener("pointerdown", (event) => {
      if (sky && event.button === 0 && within(at(event))) {
        scope.setPointerCapture(event.pointerId);
        choose(event);
      }
    });
    scope.addEventListener("pointermove", (event) => {
      if (scope.hasPointerCapture(event.pointerId)) {
        choose(event);
      } else if (sky && event.pointerType === "mouse") {
        const direction = at(event);
        hover = within(direction) ? { elevation: tenth(direction.elevation), azimuth: tenth(direction.azimuth) } : null;
        drawNumbers();
      }
    });
    scope.addEventListener("pointerleave", () => {
      if (hover) {
        hover = null;
        drawNumbers();
      }
    });
    const steps = { ArrowUp: [1, 0], ArrowDown: [-1, 0], ArrowLeft: [0, -1], ArrowRight: [0, 1] };
    scope.addEventListener("keydown", (event) => {
      const step = !(event.altKey || event.ctrlKey || event.metaKey) && steps[event.key];
      if (step) {
        event.preventDefault();
        const size = event.shiftKey ? 10 : 1;
        update({ elevation: held(state.elevation + size * step[0]), azimuth: turned(state.azimuth + size * step[1]) });
      }
    });
  };

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
    pressed("copy-list", () => copied(csvOf(pinned, constants, remarks()), byId("list-said")));
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
  followPicture();
  followButtons();
  followAddress();
  byId("reader").hidden = false;
  tellFaults();
  update({ pins: state.pins });
})();
