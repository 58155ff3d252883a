// Comforts; every page is complete without them. Arrow keys step along a ruler of sheets, and from block to block of
// a swatch table; the block that has focus, or is under the pointer, shows its row of the full table in one fixed
// place, from where it can be copied.
"use strict";

(() => {
  const isPlain = (event) => !(event.altKey || event.ctrlKey || event.metaKey || event.shiftKey);

  const stepBySheet = (ruler) => {
    document.querySelector("[data-keys]").hidden = false;
    document.addEventListener("keydown", (event) => {
      const rel = { ArrowLeft: "prev", ArrowRight: "next" }[event.key];
      const free = document.activeElement === document.body || ruler.contains(document.activeElement);
      const link = rel && ruler.querySelector(`a[rel=${rel}]`);
      if (link && free && isPlain(event)) {
        event.preventDefault();
        link.click();
      }
    });
  };

  const readTable = (table) => {
    const [groups, heads] = table.tHead.rows;
    const labels = [...groups.cells].filter((cell) => cell.classList.contains("label"));
    const spans = [...groups.cells].filter((cell) => cell.classList.contains("group"));
    const groupOf = spans.flatMap((cell) => Array(cell.colSpan).fill(cell.textContent.trim()));
    const columns = [...heads.cells].map((cell, i) => ({
      group: groupOf[i],
      head: cell.firstChild.textContent.trim(),
      unit: cell.querySelector("small")?.textContent ?? "",
    }));
    return { labels: labels.map((cell) => cell.firstChild.textContent.trim()), columns };
  };

  // Columns of one letter belong together (x y, R G B); others get a line each.
  const linesOf = (columns, cells) => {
    const lines = [];
    columns.forEach((column, i) => {
      const text = cells[i];
      const joint = [...column.head.replace("′", "")].length === 1;
      const last = lines.at(-1);
      if (joint && last?.joint && last.group === column.group) {
        last.heads.push(column.head);
        last.values.push(text);
      } else {
        lines.push({ group: column.group, joint, heads: [column.head], values: [text], unit: column.unit });
      }
    });
    return lines;
  };

  const nameOf = (line) => {
    const plain = ["Light", "Colour of light"].includes(line.group);
    return line.joint ? line.group : plain ? line.heads[0] : `${line.group} ${line.heads[0]}`;
  };

  const element = (tag, text) => {
    const made = document.createElement(tag);
    made.textContent = text;
    return made;
  };

  const numbersOf = (head, row) => {
    const [labels, cells] = [[], []];
    for (const cell of row.cells) {
      (cell.tagName === "TH" ? labels : cells).push(cell.textContent.trim());
    }
    const title = head.labels.map((label, i) => `${label} ${labels[i]}°`).join(", ");
    return { title: title.charAt(0) + title.slice(1).toLowerCase(), lines: linesOf(head.columns, cells) };
  };

  const asText = ({ title, lines }) =>
    [title, ...lines.map((line) => [`${nameOf(line)} ${line.unit}`.trim(), ...line.values].join("\t"))].join("\n");

  const pairOf = (line) => {
    const name = element("dt", nameOf(line));
    if (line.unit) {
      name.append(" ", element("small", line.unit));
    }
    const pair = document.createElement("div");
    pair.append(name, element("dd", line.values.join("  ")));
    return pair;
  };

  const fillReadout = (readout) => {
    const [title, button, said] = [element("h3", ""), element("button", "Copy"), element("output", "")];
    const list = document.createElement("dl");
    let shown;
    button.type = "button";
    button.addEventListener("click", async () => {
      try {
        await navigator.clipboard.writeText(asText(shown));
        said.textContent = "Copied.";
      } catch {
        getSelection().selectAllChildren(list);
        said.textContent = "Selected: copy with Ctrl+C.";
      }
    });
    readout.replaceChildren(title, list, button, said);
    return (numbers) => {
      shown = numbers;
      title.textContent = numbers.title;
      said.textContent = "";
      list.replaceChildren(...numbers.lines.map(pairOf));
    };
  };

  // Where each block lies: its row, and its first and last column.
  const placesOf = (tables) => {
    const rows = tables.flatMap((table) => [...table.tBodies].flatMap((body) => [...body.rows]));
    return rows.flatMap((row, y) => {
      let next = 0;
      return [...row.querySelectorAll("td")].map((cell) => {
        const left = next;
        next += cell.colSpan;
        return { block: cell.querySelector("a"), row: y, left, right: next - 1 };
      });
    });
  };

  const steps = { ArrowUp: [-1, 0], ArrowDown: [1, 0], ArrowLeft: [0, -1], ArrowRight: [0, 1] };

  const followBlocks = (readout) => {
    const head = readTable(document.getElementById("numbers"));
    const show = fillReadout(readout);
    const places = placesOf([...document.querySelectorAll(".blocks")]).filter((place) => place.block);
    const display = ({ block }) => show(numbersOf(head, document.getElementById(block.hash.slice(1))));
    let chosen = places[0];
    let column = chosen.left; // kept while passing a block that spans several
    const choose = (place) => {
      chosen.block.removeAttribute("aria-current");
      chosen.block.tabIndex = -1;
      chosen = place;
      column = Math.min(Math.max(column, place.left), place.right);
      chosen.block.setAttribute("aria-current", "true");
      chosen.block.tabIndex = 0;
      display(chosen);
    };
    const neighbour = ([down, right]) => {
      const [row, at] = [chosen.row + down, right > 0 ? chosen.right + 1 : right < 0 ? chosen.left - 1 : column];
      return places.find((place) => place.row === row && place.left <= at && at <= place.right);
    };
    for (const place of places) {
      place.block.tabIndex = -1;
      place.block.addEventListener("pointerenter", () => display(place));
      place.block.addEventListener("pointerleave", () => display(chosen));
      place.block.addEventListener("focus", () => choose(place));
      place.block.addEventListener("click", (event) => {
        event.preventDefault();
        choose(place);
      });
      place.block.addEventListener("keydown", (event) => {
        const step = isPlain(event) && steps[event.key];
        if (step) {
          event.preventDefault();
          neighbour(step)?.block.focus();
        }
      });
    }
    choose(chosen);
  };

  const ruler = document.querySelector("[data-ruler]");
  const readout = document.querySelector("[data-readout]");
  if (ruler) {
    stepBySheet(ruler);
  }
  if (readout) {
    followBlocks(readout);
  }
})();
