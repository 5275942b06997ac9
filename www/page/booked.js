// A table that is booked row by row as the work goes on: names and times that fill themselves in, the reading said back,
// headings and cautions at rows. What it is called, said and warned of comes from the core; only the clock is the page's.
import { byId, copy, fill, key, within } from "./dom.js";
import { cellsOf, isBlank } from "./rows.js";

/** @typedef {import("./rows.js").Column} Column */
/** @typedef {import("./core.js").AtRow} AtRow */
/** @typedef {import("./core.js").Booked} Booked */
/** @typedef {import("./field.js").Around} Around */

const LOOKED_BACK = 100; // rows that say how the next one is called: so many cost nothing
const PAUSE_MS = 1000; // then a reading is said to those who cannot see it

/** What this device's clock shows; with the day where no row has that day yet. @param {readonly string[]} lines */
function clock(lines) {
  const now = new Date();
  const [day = "", time = ""] = new Date(now.getTime() - now.getTimezoneOffset() * 60_000).toISOString().split("T");
  return `${lines.some((line) => line.includes(day)) ? "" : `${day} `}${time.slice(0, 5)}`;
}

/** @param {string} name @param {readonly Column[]} columns @param {Around} around */
export function startBooked(name, columns, around) {
  const top = copy("t-heard");
  const ask = within(top, ".ask");
  let saying = 0;
  let said = ""; // waits to be said to those who cannot see it
  /** @param {number} column */
  const aidOf = (column) => columns[column]?.field.aid;

  /** What the core makes of some rows alone. @param {readonly string[]} lines @param {Record<string, string>} [more] */
  const read = (lines, more) => around.read({
    [name]: lines.join("\n"), ...Object.fromEntries(columns.map(({ unitName, unit }) => [unitName, unit])), ...more,
  });

  /** Where and how the row after these goes on. @param {readonly string[]} lines @returns {Booked | undefined} */
  const next = (lines) => read(lines.slice(-LOOKED_BACK)).booked.find(({ field }) => field === name);

  function speak() {
    clearTimeout(saying);
    if (said) byId("heard").textContent = said;
    said = "";
  }

  /** @param {string} label @param {string} words */
  function hear(label, words) {
    fill(top, "label", label);
    fill(top, "words", words);
    clearTimeout(saying);
    said = `${label} ${words}`.trim();
    saying = setTimeout(speak, PAUSE_MS);
  }

  return {
    top,
    speak,
    /** Column in which the row after these is begun. @param {readonly string[]} lines */
    begin: (lines) => next(lines)?.begin ?? 0,
    /** Staff readings of a row exclude each other mostly: from one that is there Enter passes those that are not.
     * @param {number} from @param {number} to @param {readonly { value: string }[]} cells */
    passed: (from, to, cells) => [from, to].every((column) => aidOf(column) === "staff")
      && cells[from]?.value !== "" && cells[to]?.value === "",
    /** What a row gets by itself as it is begun. @param {readonly string[]} lines @param {number} at @param {number} column
     * @param {string[]} cells */
    begun(lines, at, column, cells) {
      if (!isBlank(lines[at] ?? "\t") || cells[column] === "") return;
      columns.forEach((_, index) => {
        const aid = aidOf(index);
        if (index === column) return;
        while (cells.length <= index) cells.push("");
        if (aid === "stamped") cells[index] = clock(lines);
        else if (aid === "numbered" && at + 1 >= lines.length) {
          cells[index] = next(lines.slice(0, at))?.names.find((named) => named.column === column)?.text ?? "";
        }
      });
    },
    /** Says back what was typed. @param {string} line @param {number} column */
    typed(line, column) {
      const heard = read([line], { [`${name}.at`]: String(column) }).heard;
      hear(heard?.label ?? "", heard?.words ?? "");
    },
    /** Says something at the open row that has to be answered. @param {string} text @param {Record<string, () => void>} keys */
    ask(text, keys) {
      fill(ask, "text", text);
      ask.hidden = text === "";
      const done = () => { ask.hidden = true; };
      within(ask, ".keys").replaceChildren(...Object.entries(keys).map(([words, act]) => key(words, () => { done(); act(); })));
      said = text;
      speak();
    },
  };
}

/** Says headings and cautions at the rows of a table. */
export function startTold() {
  /** @type {WeakMap<Element, string>} */
  const shown = new WeakMap();
  /** @param {HTMLElement} list @param {readonly AtRow[]} rows
   * @param {(cell: import("./core.js").Cell) => boolean} ripe not of what is just being typed */
  return (list, rows, ripe) => {
    const items = [...list.children];
    const wanted = new Map(rows.map((each) => [items[each.row], each]));
    for (const li of new Set([...list.querySelectorAll(":scope > .said"), ...wanted.keys()])) {
      if (!li) continue;
      const { row = 0, head = "", cautions: all = [] } = wanted.get(li) ?? {};
      const cautions = all.filter(({ column }) => ripe({ row, column }));
      const words = JSON.stringify([head, cautions]);
      if (shown.get(li) === words) continue;
      shown.set(li, words);
      for (const old of li.querySelectorAll(":scope > .lead, :scope > .told")) old.remove();
      li.classList.toggle("begins", head !== "");
      li.classList.toggle("said", head !== "" || cautions.length > 0);
      if (head) li.prepend(line("lead", head));
      li.querySelector(".brief")?.after(...cautions.map(({ text }) => line("told", text)));
    }
  };
}

/** @param {string} style @param {string} text */
function line(style, text) {
  const made = document.createElement("p");
  made.className = style;
  made.textContent = text;
  return made;
}
