// Parts of the reader's page that know nothing of its state: they are given numbers and return elements.
"use strict";

const readerWidgets = (() => {
  const { fixed, kelvin, short, significant, spaced } = readerNumbers;
  const { differenceFrom, stopsAbove } = readerReading;

  const element = (tag, text = "", className = "") => {
    const made = document.createElement(tag);
    made.textContent = text;
    made.className = className;
    return made;
  };

  const delayed = (task, wait) => {
    let timer = 0;
    return () => {
      clearTimeout(timer);
      timer = setTimeout(task, wait);
    };
  };

  // Copy a text and tell about it in the element `said`.
  const copied = async (text, said) => {
    try {
      await navigator.clipboard.writeText(text);
      said.textContent = "Copied.";
    } catch {
      const area = element("textarea", text, "unseen");
      document.body.append(area);
      area.select();
      said.textContent = document.execCommand("copy") ? "Copied." : "This browser lets no page copy.";
      area.remove();
    }
  };

  // A number that is copied, as plain text, when it is pressed.
  const valueButton = (label, plain, shownText, said) => {
    const button = element("button", shownText, "value");
    button.type = "button";
    button.setAttribute("aria-label", `${label} ${plain || "none"}, copy`);
    button.disabled = plain === "";
    button.addEventListener("click", () => copied(plain, said));
    return button;
  };

  // A line of numbers: its name, its unit, plain texts.
  const pairOf = ([label, unit, ...plain], said) => {
    const [name, values] = [element("dt", label), element("dd")];
    if (unit) {
      name.append(" ", element("small", unit));
    }
    values.append(...plain.map((text) => valueButton(label, text, text.startsWith("#") || /[a-z]{2}/i.test(text) ? text : spaced(text), said)));
    const pair = document.createElement("div");
    pair.append(name, values);
    return pair;
  };

  // The light on the ground as a list of facts.
  const factsOf = ({ apparent, sky, level, beam, card }) => {
    const lux = (value) => [spaced(significant(value, 3)), "lx"];
    const facts = [
      ["Sun seen at", ...(beam[1] > 0 ? [spaced(fixed(apparent, 2)), "°"] : ["below the horizon", ""])],
      ["Sun, facing it", ...lux(beam[1])],
      ["Sun on level ground", ...lux(level[1])],
      ["Sky on level ground", ...lux(sky[1])],
      ["White card, level", spaced(significant(card[1], 3)), "cd/m²"],
    ];
    return facts.map(([name, value, unit]) => {
      const [pair, number] = [document.createElement("div"), element("dd", value)];
      if (unit) {
        number.append(" ", element("small", unit));
      }
      pair.append(element("dt", name), number);
      return pair;
    });
  };

  // A row of the list of readings; `tasks` are what its buttons do, by their names.
  const pinRow = (found, first, azimuth, number, tasks) => {
    const [row, swatch, actions] = [element("tr"), element("td", "", "swatch"), element("td", "", "actions")];
    swatch.style.background = found.srgb_hex;
    swatch.append(element("span", found.srgb_hex, "unseen"));
    const cells = [
      found.atmosphere,
      ...[found.solar_elevation_deg, found.view_elevation_deg, azimuth].map((angle) => spaced(short(angle, 2))),
      spaced(significant(found.luminance_cd_m2, 3)),
      spaced(fixed(stopsAbove(found, first), 2)),
      fixed(differenceFrom(found, first), 1),
      ...found.xy.map((value) => fixed(value, 4)),
      spaced(kelvin(found.cct_k)),
      found.srgb_hex,
    ];
    const buttons = Object.entries(tasks).map(([text, task]) => {
      const made = element("button", text);
      made.type = "button";
      made.setAttribute("aria-label", `${text} reading ${number}`);
      made.addEventListener("click", task);
      return made;
    });
    actions.append(...buttons);
    row.append(swatch, ...cells.map((text) => element("td", text)), actions);
    return row;
  };

  return { copied, delayed, element, factsOf, pairOf, pinRow };
})();
