// Two comforts; every page is complete without them. Arrow keys step along a ruler of sheets; the block of a
// swatch table that has focus, or is under the pointer, shows its row of the full table in one fixed place.
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

  const show = (readout, head, row) => {
    const [labelCells, cells] = [[], []];
    for (const cell of row.cells) {
      (cell.tagName === "TH" ? labelCells : cells).push(cell.textContent.trim());
    }
    const list = document.createElement("dl");
    for (const line of linesOf(head.columns, cells)) {
      const name = element("dt", nameOf(line));
      if (line.unit) {
        name.append(" ", element("small", line.unit));
      }
      const pair = document.createElement("div");
      pair.append(name, element("dd", line.values.join("  ")));
      list.append(pair);
    }
    const title = head.labels.map((label, i) => `${label} ${labelCells[i]}°`).join(", ");
    readout.replaceChildren(element("h3", title.charAt(0) + title.slice(1).toLowerCase()), list);
  };

  const followBlocks = (readout) => {
    const head = readTable(document.getElementById("numbers"));
    const blocks = [...document.querySelectorAll(".blocks td a")];
    const display = (block) => show(readout, head, document.getElementById(block.hash.slice(1)));
    let chosen = blocks[0];
    const choose = (block) => {
      chosen.removeAttribute("aria-current");
      chosen = block;
      chosen.setAttribute("aria-current", "true");
      display(chosen);
    };
    for (const block of blocks) {
      block.addEventListener("pointerenter", () => display(block));
      block.addEventListener("pointerleave", () => display(chosen));
      block.addEventListener("focus", () => choose(block));
      block.addEventListener("click", (event) => {
        event.preventDefault();
        choose(block);
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
