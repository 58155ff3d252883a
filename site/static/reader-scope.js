// The picture of the sky with its marks, and the pointer and keys on it. It knows nothing of the reader's state: it is given
// what to draw, and tells which direction was pointed at.
"use strict";

const readerScope = (() => {
  const { fixed, significant, spaced } = readerNumbers;

  const PIXELS = { "all-sky": () => readerPicture.allSkyPixels(480), panorama: () => readerPicture.panoramaPixels(720) };
  const STEPS = { ArrowUp: [1, 0], ArrowDown: [-1, 0], ArrowLeft: [0, -1], ArrowRight: [0, 1] };
  const INK_THRESHOLD = 0.179; // relative luminance above which black reads better than white (WCAG 2.2)

  const byId = (id) => document.getElementById(id);
  const marksOf = (picture) => byId(`marks-${picture}`);
  const between = (value, low, high) => Math.min(Math.max(value, low), high);
  const tenth = (angle) => Number(fixed(angle, 1));

  // Where a direction lies in the marks' own units, and which direction a place in them is.
  const spotOf = (picture, elevation, azimuth) => {
    if (picture === "panorama") {
      return [azimuth, 90 - elevation];
    }
    const [distance, turn] = [(100 * (90 - elevation)) / 90, (azimuth * Math.PI) / 180];
    return [distance * Math.sin(turn), distance * Math.cos(turn)];
  };

  const directionAt = (picture, x, y) => {
    if (picture === "panorama") {
      return { elevation: 90 - y, azimuth: x };
    }
    return { elevation: 90 - 0.9 * Math.hypot(x, y), azimuth: (Math.atan2(x, y) * 180) / Math.PI };
  };

  const within = ({ elevation, azimuth }) => elevation >= 0 && elevation <= 90 && Math.abs(azimuth) <= 180;

  const held = ({ elevation, azimuth }) => ({
    elevation: tenth(between(elevation, 0, 90)),
    azimuth: tenth(between(azimuth, -180, 180)),
  });

  // The direction so many degrees higher and farther right, held between horizon and zenith and turned past 180°.
  const moved = ({ elevation, azimuth }, up, right) => {
    const turned = azimuth + right;
    return {
      elevation: between(elevation + up, 0, 90),
      azimuth: turned > 180 ? turned - 360 : turned < -180 ? turned + 360 : turned,
    };
  };

  // Ink that reads on the sky 60° up beside the sun.
  const inkOf = (sky, white, constants) => {
    const codes = readerColour.hex(readerSky.directionOf(sky, 60, 90).XYZ, white, constants).match(/\w\w/g);
    const linear = codes.map((code) => parseInt(code, 16) / 255).map((v) => (v <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4));
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2] > INK_THRESHOLD ? "dark" : "light";
  };

  // A function that draws a view: sky, name of the picture, display white [cd/m²], chosen elevation and azimuth [°]. What two
  // views have in common is not computed again.
  const drawer = (constants) => {
    const canvas = byId("canvas");
    const wide =
      matchMedia("(color-gamut: p3)").matches &&
      canvas.getContext("2d", { colorSpace: "display-p3" })?.getContextAttributes?.().colorSpace === "display-p3";
    const screenSpace = wide ? "display-p3" : "srgb";
    const drawing = canvas.getContext("2d", { colorSpace: screenSpace });
    const prepared = {};
    const drawn = { sky: null, picture: "", XYZ: null, image: null };

    const drawPicture = ({ sky, picture, white }) => {
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
      const matrix = constants.spaces[screenSpace].from_xyz.map((row) => row.map((value) => value / white));
      readerColour.painted(drawn.XYZ, pixels.at, matrix, drawn.image.data);
      drawing.putImageData(drawn.image, 0, 0);
    };

    const drawMarks = ({ sky, picture, white, elevation, azimuth }) => {
      for (const name of Object.keys(PIXELS)) {
        marksOf(name).toggleAttribute("hidden", name !== picture);
      }
      byId("scope").dataset.picture = picture;
      const marks = marksOf(picture);
      const ink = inkOf(sky, white, constants);
      for (const part of marks.querySelectorAll("[data-ink]")) {
        part.classList.toggle("dark", ink === "dark");
        part.classList.toggle("light", ink === "light");
      }
      const place = (mark, up, right) => marks.querySelector(mark).setAttribute("transform", `translate(${spotOf(picture, up, right)})`);
      place("[data-sun]", Math.max(sky.light.apparent, -9), 0);
      place("[data-pointer]", elevation, azimuth);
      byId("scope-said").textContent =
        `Drawn in ${constants.spaces[screenSpace].title}; display white ${spaced(significant(white, 3))} cd/m².`;
    };

    return (view) => {
      drawPicture(view);
      drawMarks(view);
    };
  };

  // Pointer and keys: `choose` and `hover` get a direction, `hover` null where there is no sky, `step` degrees up and right.
  // Nothing is told before the first picture is drawn.
  const follow = ({ choose, hover, step }) => {
    const scope = byId("scope");
    const at = (event) => {
      const { picture } = scope.dataset;
      const point = new DOMPoint(event.clientX, event.clientY).matrixTransform(marksOf(picture).getScreenCTM().inverse());
      return directionAt(picture, point.x, point.y);
    };
    const isDrawn = () => "picture" in scope.dataset;
    scope.addEventListener("pointerdown", (event) => {
      if (isDrawn() && event.button === 0 && within(at(event))) {
        scope.setPointerCapture(event.pointerId);
        choose(held(at(event)));
      }
    });
    scope.addEventListener("pointermove", (event) => {
      if (scope.hasPointerCapture(event.pointerId)) {
        choose(held(at(event)));
      } else if (isDrawn() && event.pointerType === "mouse") {
        const direction = at(event);
        hover(within(direction) ? held(direction) : null);
      }
    });
    scope.addEventListener("pointerleave", () => hover(null));
    scope.addEventListener("keydown", (event) => {
      const way = !(event.altKey || event.ctrlKey || event.metaKey) && STEPS[event.key];
      if (way) {
        event.preventDefault();
        const size = event.shiftKey ? 10 : 1;
        step(size * way[0], size * way[1]);
      }
    });
  };

  return { drawer, follow, moved };
})();
