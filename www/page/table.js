// A table field: one row is open and has boxes, the others are lines to read, so that thousands of them cost little. A
// phone shows cards, a wide screen a grid. Every act makes a new text, and `write` puts only what differs on the page.
import { startBooked, startTold } from "./booked.js";
import { startBringing } from "./bring.js";
import { closedPattern, makeCell, makeHead, showAsked, showWrong, SPARE } from "./cell.js";
import { byId, copy, download, fill, hold, within } from "./dom.js";
import { dress, helpOf, isAsked, usualUnit } from "./field.js";
import {
  cellsOf, changedBetween, columnsOfTable, heading, isBlank, isStruck, lineOf, linesOf, optionOf, separated, shown,
} from "./rows.js";

/** @typedef {import("./field.js").Field} Field */
/** @typedef {import("./field.js").Around} Around */
/** @typedef {import("./field.js").Box} Box */
/** @typedef {import("./core.js").Cell} Cell */
/** @typedef {import("./core.js").Problem} Problem */
/** @typedef {import("./cell.js").Control} Control */
/** @typedef {{ at: number, root: HTMLElement, controls: Control[] }} Open the row that has boxes */

const LISTED = 2000; // rows; more are folded until they are asked for

/** @param {string} word */
const capital = (word) => word.charAt(0).toUpperCase() + word.slice(1);

/** @param {readonly Node[]} nodes */
function gathered(nodes) {
  const all = document.createDocumentFragment();
  for (const node of nodes) all.append(node);
  return all;
}

/** @param {any} field @param {Around} around @returns {Box} */
export function tableBox(field, around) {
  const { name, label } = field;
  /** @type {string} */
  const row = field.kind.row;
  const root = copy("t-rows");
  const list = within(root, ".rows");
  const fold = within(root, ".fold");
  const columns = columnsOfTable(field, around);
  const groups = [...new Set(columns.map((column) => column.field.group).filter(Boolean))];
  /** @type {Set<string>} words under which columns are open on a phone */
  const unfolded = new Set();
  let text = "";
  /** @type {string[]} */
  let lines = [];
  /** @type {Open | undefined} */
  let open;
  let listed = true;
  let askedFor = false; // more rows than are listed by themselves
  let drawn = ""; // the headings the lines were drawn with
  /** @type {Map<number, string>} rows that show what is wrong, and what they show */
  let marked = new Map();

  dress(root, field, root);
  const heads = columns.map((column) => makeHead(column, (unit) => around.change({ [column.unitName]: unit }, "")));
  within(root, ".heads").append(...heads.map(({ root: made }) => made));
  const pattern = closedPattern(columns);
  fit();

  /** Shows the columns that are asked, and no others. */
  function fit() {
    showAsked(root, columns, [heads.map(({ root: head }) => head), pattern.querySelectorAll("[data-l]"), list.querySelectorAll("[data-l]")]);
    if (!open) return;
    const { at } = open;
    close();
    openRow(at);
  }
  const booked = field.kind.booking ? startBooked(name, columns, around) : undefined;
  const told = startTold();

  /** @param {number} at */
  const item = (at) => /** @type {HTMLElement | undefined} */ (list.children[at]);

  /** Writes a line that is closed; past the last one stands the row to come. @param {HTMLElement} li @param {number} at */
  function draw(li, at) {
    const line = lines[at];
    const button = within(li, ".brief");
    const spans = button.children;
    const cells = cellsOf(line ?? "\t");
    li.classList.toggle("struck", line !== undefined && isStruck(line));
    button.classList.toggle("new", line === undefined);
    number(li, at);
    columns.forEach((column, index) => {
      const span = spans[index + 1];
      const words = shown(column.field, cells[index]);
      if (span && span.textContent !== words) span.textContent = words;
    });
    const rest = /** @type {HTMLElement} */ (spans[columns.length + 1]);
    rest.textContent = line === undefined ? `New ${row}` : cells.slice(columns.length).join(" ");
  }

  /** @param {HTMLElement} li @param {number} at */
  function number(li, at) {
    const no = within(li, ".brief b");
    const words = String(at + 1);
    if (no.textContent !== words) no.textContent = words;
  }

  /** Brings the rows on the page in line with `now`. @param {string[]} now */
  function show(now) {
    const { start, oldEnd, nowEnd } = changedBetween(lines, now);
    const grown = now.length - lines.length;
    lines = now;
    const wasListed = listed;
    listed = askedFor || lines.length <= LISTED;
    fold.hidden = listed;
    list.hidden = !listed;
    within(fold, "p").textContent = `${lines.length} rows are kept and computed. They are not listed one by one.`;
    if (!listed || !wasListed || list.children.length === 0) {
      close();
      marked = new Map();
      list.replaceChildren(gathered(listed ? fresh(0, lines.length + 1) : []));
      return;
    }
    const items = /** @type {HTMLElement[]} */ ([...list.children]); // asked for one by one, each would be counted anew
    const kept = Math.min(oldEnd, nowEnd);
    const gone = open && open.at >= start && open.at < oldEnd && open.at >= nowEnd ? open.at : -1;
    const come = open && open.at === start && start === lines.length - grown && grown > 0 ? start : -1; // what was to come
    const held = document.activeElement;
    const way = held instanceof HTMLElement && open?.root.contains(held) ? held.dataset.travel : undefined;
    if (gone >= 0) close();
    for (const li of items.splice(kept, oldEnd - kept)) li.remove();
    const made = fresh(kept, nowEnd);
    list.insertBefore(gathered(made), items[kept] ?? null);
    items.slice(start, kept).forEach((li, index) => draw(li, start + index));
    if (grown !== 0) {
      items.slice(kept).forEach((li, index) => number(li, nowEnd + index));
      for (const li of list.querySelectorAll(".bad")) showWrong(/** @type {HTMLElement} */ (li), [], around.fix);
      marked = new Map();
      if (open && open.at >= oldEnd) open.at += grown;
    }
    if (open) refill(open);
    if (!booked || Math.max(gone, come) < 0) return;
    openRow(Math.min(Math.max(gone, come), lines.length)); // someone books there
    if (way) within(list, `[data-travel=${way}]`).focus();
  }

  /** Lines that are new on the page. @param {number} start @param {number} end */
  function fresh(start, end) {
    return Array.from({ length: end - start }, (_, index) => {
      const li = /** @type {HTMLElement} */ (pattern.cloneNode(true));
      draw(li, start + index);
      return li;
    });
  }

  /** One act, undone at once. @param {string[]} now */
  function change(now) {
    show(now);
    keep("");
  }

  /** @param {string} step */
  function keep(step) {
    text = lines.every(isBlank) ? "" : lines.join("\n");
    around.change({ [name]: text }, step);
  }

  /** Puts what the open row holds into its boxes. @param {Open} it */
  function refill({ at, root: editor, controls }) {
    const line = lines[at];
    const cells = cellsOf(line ?? "\t");
    const struck = line !== undefined && isStruck(line);
    controls.forEach((control, index) => {
      const cell = cells[index] ?? "";
      if (control instanceof HTMLSelectElement) {
        const column = columns[index];
        const value = (column && optionOf(column.field, cell)?.value) ?? cell;
        if (![...control.options].some((option) => option.value === value)) control.append(new Option(cell, cell));
        control.value = value;
        control.disabled = struck;
      } else {
        if (control.value !== cell) control.value = cell;
        control.readOnly = struck;
      }
    });
    fill(editor, "row", `${capital(row)} `);
    fill(editor, "no", `${at + 1}${struck ? ", struck" : ""}`);
    /** @param {string} act @param {boolean} on */
    const can = (act, on) => { /** @type {HTMLButtonElement} */ (within(editor, `[data-do=${act}]`)).disabled = !on; };
    can("insert", line !== undefined);
    can("up", line !== undefined && at > 0);
    can("down", at + 1 < lines.length);
    can("strike", line !== undefined);
    within(editor, "[data-do=strike]").textContent = struck ? "Count it again" : line && isBlank(line) ? "Remove" : "Strike";
  }

  /** What the person typed into a cell. @param {number} at @param {number} column @param {string} value */
  function typed(at, column, value) {
    const line = lines[at] ?? "\t";
    const cells = cellsOf(line);
    while (cells.length <= column) cells.push("");
    cells[column] = value;
    booked?.begun(lines, at, column, cells);
    lines = [...lines];
    lines[at] = lineOf(cells, isStruck(line));
    // The row to come is begun: the next one to come stands below it.
    if (list.children.length === lines.length) {
      list.append(pattern.cloneNode(true));
      draw(/** @type {HTMLElement} */ (list.lastElementChild), lines.length);
    }
    const li = item(at);
    if (li) draw(li, at);
    if (open) refill(open);
    if (booked) around.stand(name, at);
    keep(`${name} ${at} ${column}`);
    booked?.typed(lines[at] ?? "\t", column);
  }

  /** @param {Cell} cell @param {string} value */
  function put({ row: at, column }, value) {
    const cells = cellsOf(lines[at] ?? "\t");
    while (cells.length <= column) cells.push("");
    cells[column] = value;
    change(lines.map((line, index) => (index === at ? lineOf(cells, isStruck(line)) : line)));
  }

  /** Opens a row and closes the one that was open. @param {number} at @param {number} [column] */
  function openRow(at, column = 0) {
    const li = item(at);
    if (open?.at === at || !li) return open;
    const editor = copy("t-edit");
    const help = within(editor, ".help");
    const extra = cellsOf(lines[at] ?? "\t").slice(columns.length);
    const made = [...columns, ...extra.map(() => SPARE)].map((column, index) => {
      const made = makeCell(column, [`${name}-${at}`, String(index)], (value) => { if (open) typed(open.at, index, value); });
      made.cell.classList.toggle("folded", column.field.group !== "" && !unfolded.has(column.field.group));
      made.box.addEventListener("focus", () => { help.textContent = helpOf(column.field); });
      return made;
    });
    within(editor, ".cells").append(...made.map(({ cell }) => cell));
    within(editor, ".no").id = `${name}-${at}`;
    help.id = `${name}-${at}-help`;
    if (booked) within(editor, ".headline").append(booked.top);
    for (const key of /** @type {NodeListOf<HTMLButtonElement>} */ (editor.querySelectorAll("[data-travel]"))) {
      key.disabled = /** @type {HTMLButtonElement} */ (byId(key.dataset.travel ?? "")).disabled;
    }
    within(editor, ":scope > .keys").prepend(...groups
      .filter((group) => columns.some(({ asked, field: of }) => asked && of.group === group)).map((group) => groupKey(group)));
    for (const key of /** @type {NodeListOf<HTMLElement>} */ (editor.querySelectorAll("[data-do]"))) {
      key.addEventListener("click", () => act(key.dataset.do ?? ""));
    }
    const before = open;
    open = { at, root: editor, controls: made.map(({ box }) => box) };
    refill(open);
    within(li, ".wrongs").id = `${name}-${at}-wrong`;
    markCells(li, at);
    li.classList.add("open");
    li.append(editor);
    // Focus goes straight from the old row to the new one, or the phone's keyboard would go down between.
    if (before?.root.contains(document.activeElement)) open.controls[column]?.focus();
    if (before) drop(before);
    return open;
  }

  /** @param {Open} it */
  function drop(it) {
    const li = it.root.parentElement;
    li?.classList.remove("open");
    li?.querySelector(".wrongs")?.removeAttribute("id");
    it.root.remove();
  }

  function close() {
    if (open) drop(open);
    open = undefined;
  }

  /** Shows or hides the columns under a word, on a phone. @param {string} group */
  function groupKey(group) {
    const key = copy("t-key");
    key.classList.add("more");
    key.textContent = group;
    key.setAttribute("aria-expanded", String(unfolded.has(group)));
    key.addEventListener("click", () => unfold(group, !unfolded.has(group)));
    return key;
  }

  /** @param {string} group @param {boolean} on */
  function unfold(group, on) {
    if (on) unfolded.add(group);
    else unfolded.delete(group);
    for (const cell of /** @type {NodeListOf<HTMLElement>} */ (list.querySelectorAll("[data-group]"))) {
      cell.classList.toggle("folded", cell.dataset.group !== "" && !unfolded.has(cell.dataset.group ?? ""));
    }
    for (const key of list.querySelectorAll(".keys .more")) {
      key.setAttribute("aria-expanded", String(unfolded.has(key.textContent ?? "")));
    }
  }

  /** A key of the open row. @param {string} what */
  function act(what) {
    if (!open) return;
    const { at } = open;
    const here = Math.max(open.controls.findIndex((control) => control === document.activeElement), 0);
    const now = [...lines];
    const line = now[at] ?? "\t";
    if (what === "insert") now.splice(at, 0, "\t");
    else if (what === "strike" && isBlank(line)) now.splice(at, 1);
    else if (what === "strike") now[at] = lineOf(cellsOf(line), !isStruck(line));
    else {
      const to = what === "up" ? at - 1 : at + 1;
      [now[at], now[to]] = [now[to] ?? "\t", line];
      change(now);
      openRow(to, here);
      const key = /** @type {HTMLButtonElement | null} */ (item(to)?.querySelector(`[data-do=${what}]`) ?? null);
      if (key?.disabled) open?.controls[0]?.focus();
      else key?.focus();
      return;
    }
    change(now);
    if (what === "insert") focus({ row: at, column: 0 });
    else if (!open) item(at)?.querySelector("button")?.focus();
  }

  /** @param {Cell} cell */
  function focus({ row: at, column }) {
    if (!listed) listAll();
    const group = columns[column]?.field.group;
    if (group) unfold(group, true);
    const control = openRow(at, column)?.controls[column];
    control?.focus();
    control?.scrollIntoView({ block: "nearest" }); // the row above has closed meanwhile
    if (booked) around.stand(name, at);
  }

  /** Lists the rows though there are many. */
  function listAll() {
    askedFor = true;
    show(lines);
  }

  /** @param {HTMLElement} li @param {number} at */
  function markCells(li, at) {
    if (open?.at !== at) return;
    const wrong = (li.dataset.wrong ?? "").split(" ");
    open.controls.forEach((control, index) => control.setAttribute("aria-invalid", String(wrong.includes(String(index)))));
  }

  /** What is wrong there may be said now. @param {Cell} cell */
  function ripe({ row: at, column }) {
    const control = open?.controls[column];
    if (!open || at !== open.at || !open.root.contains(document.activeElement)) return true;
    if (control?.getAttribute("aria-invalid") === "true") return true; // it was said before
    return control !== document.activeElement && control?.value !== "";
  }

  list.addEventListener("click", (event) => {
    const at = event.target;
    const line = at instanceof Element ? at.closest(".brief") : null;
    const li = line?.parentElement;
    if (!line || !li || !(at instanceof Element)) return;
    const column = [...line.children].indexOf(at) - 1;
    focus({ row: [...list.children].indexOf(li), column: Math.max(column, 0) }); // a tap on a value goes to it
  });

  list.addEventListener("focusout", (event) => {
    const to = event.relatedTarget;
    booked?.speak();
    if (to instanceof Node && root.contains(to)) around.left(name);
  });

  list.addEventListener("keydown", (event) => {
    const here = open?.controls.findIndex((control) => control === event.target) ?? -1;
    if (!open || here < 0 || event.isComposing) return;
    const { at, controls } = open;
    const typing = event.target instanceof HTMLInputElement;
    if (event.key === "Enter") {
      const next = controls.find((control, index) => index > here && control.getClientRects().length > 0
        && !(booked && (control.closest(".folded") || booked.passed(here, index, controls)))); // seldom used: by tab or tap
      if (!next && at >= lines.length) return; // nothing in the row to come: on to the next field
      event.preventDefault();
      if (next) next.focus();
      else focus({ row: at + 1, column: at + 1 < lines.length ? 0 : booked?.begin(lines) ?? 0 });
    } else if (event.altKey && (event.key === "ArrowUp" || event.key === "ArrowDown")) {
      event.preventDefault();
      const what = event.key === "ArrowUp" ? "up" : "down";
      if (/** @type {HTMLButtonElement} */ (within(open.root, `[data-do=${what}]`)).disabled) return;
      act(what);
      open?.controls[here]?.focus();
    } else if (typing && (event.key === "ArrowUp" || event.key === "ArrowDown")) {
      const to = at + (event.key === "ArrowUp" ? -1 : 1);
      if (!item(to)) return;
      event.preventDefault();
      focus({ row: to, column: here });
    } else if (event.key === "Escape") {
      const line = item(at)?.querySelector(".brief");
      close();
      if (line instanceof HTMLElement) line.focus();
    }
  });

  list.addEventListener("paste", (event) => {
    const pasted = event.clipboardData?.getData("text/plain") ?? "";
    const column = open?.controls.findIndex((control) => control === event.target) ?? -1;
    if (column < 0 || !/[\t\n\r]/.test(pasted.trimEnd())) return; // a single cell goes where any text goes
    event.preventDefault();
    bring(pasted, column);
  });

  const bring = startBringing({
    field, around, columns, row,
    at: () => Math.min(open?.at ?? lines.length, lines.length),
    lines: () => lines,
    take: (now, units, first) => {
      around.change({ ...units, [name]: now.join("\n") }, "");
      if (listed && lines.length > 0) focus({ row: Math.min(first, lines.length - 1), column: 0 });
    },
  });

  /** @param {string} css @param {() => void} act */
  const on = (css, act) => within(root, css).addEventListener("click", act);
  on(".fold button", () => { listAll(); item(0)?.querySelector("button")?.focus(); });
  on("[data-do=bring]", () => bring("", 0));
  on("[data-do=comma]", () => save(";"));
  on("[data-do=point]", () => save(","));
  on("[data-do=heads]", () => {
    const shown = root.classList.toggle("with-heads");
    within(root, "[data-do=heads]").setAttribute("aria-expanded", String(shown));
  });

  /** @param {"," | ";"} separator */
  function save(separator) {
    // The mark before the text tells a spreadsheet that it is UTF-8.
    download(`${label}.csv`, `\ufeff${separated(columns, lines, separator)}`, "text/csv");
  }

  return {
    field,
    root,
    target: () => /** @type {HTMLElement} */ (open?.controls[0] ?? list.querySelector(".new") ?? fold.querySelector("button") ?? root),
    write(entry) {
      columns.forEach((column, index) => {
        column.unit = entry[column.unitName] || (column.info ? usualUnit(column.info, around.units()) : "");
        if (heads[index]) heads[index].select.value = column.unit;
      });
      const said = columns.map(heading);
      if (said.join() !== drawn) {
        drawn = said.join();
        const short = columns.map(({ field: { label: words }, unit }) => `${words} ${unit}`.trim());
        [...pattern.querySelectorAll("[data-l]"), ...list.querySelectorAll("[data-l]")].forEach((span, index) => {
          span.setAttribute("data-l", short[index % columns.length] ?? "");
        });
        open?.controls.forEach((control, index) => {
          const words = control.closest(".cell")?.querySelector("label");
          if (words && said[index]) words.textContent = said[index];
        });
        const units = [...new Set(columns.map(({ unit }) => unit).filter(Boolean))];
        within(root, "[data-do=heads]").textContent = ["Columns", units.join(", ")].filter(Boolean).join(": ");
      }
      const now = entry[name] ?? "";
      if (now === text && list.children.length > 0) return;
      text = now;
      show(linesOf(now));
      if (lines.length === 0) openRow(0);
    },
    cells: {
      focus,
      put,
      ripe,
      stand(at, text, keys) {
        if (!listed) listAll();
        openRow(Math.min(at, lines.length));
        booked?.ask(text, keys);
        const row = item(open?.at ?? at);
        if (row) hold(/** @type {HTMLElement} */ (row.querySelector(".ask:not([hidden])") ?? row));
      },
      rows(rows) { told(list, rows, ripe); },
      tell(problems, read) {
        const asked = columns.map((column) => isAsked(column.field, read));
        if (columns.some((column, at) => column.asked !== asked[at])) {
          columns.forEach((column, at) => { column.asked = asked[at] ?? true; });
          fit();
        }
        /** @type {Map<number, Problem[]>} */
        const wrong = new Map();
        for (const problem of problems) {
          const at = problem.cell?.row ?? 0;
          wrong.set(at, [...(wrong.get(at) ?? []), problem]);
        }
        for (const at of new Set([...marked.keys(), ...wrong.keys()])) {
          const li = item(at);
          const mine = wrong.get(at) ?? [];
          const said = JSON.stringify(mine);
          if (!li || marked.get(at) === said) continue;
          showWrong(li, mine, around.fix);
          markCells(li, at);
          if (mine.length > 0) marked.set(at, said);
          else marked.delete(at);
        }
      },
    },
  };
}
