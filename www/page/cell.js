// The pieces of a table: what stands over a column, a cell that can be filled, a row that is closed.
import { copy, fixKeys, within } from "./dom.js";
import { fillUnits, helpOf, startSign } from "./field.js";
import { heading, optionOf } from "./rows.js";

/** @typedef {import("./rows.js").Column} Column */
/** @typedef {HTMLInputElement | HTMLSelectElement} Control */

const MANY = 9; // columns; more are drawn smaller in the grid, the seldom used ones narrower

/** @type {Column} a cell beyond the last column: it is kept until the person clears it */
export const SPARE = {
  field: {
    name: "", label: "One cell too many", help: "", kind: { type: "text", most: 0, why: "" }, default: "", example: "",
    required: false, shared: false, group: "",
  },
  unitName: "",
  info: undefined,
  unit: "",
  asked: true,
};

/** Name of a column, what it means, its unit. @param {Column} column @param {(unit: string) => void} pick */
export function makeHead({ field, info }, pick) {
  const root = copy("t-head");
  const select = /** @type {HTMLSelectElement} */ (within(root, "select"));
  within(root, "b").textContent = field.label;
  within(root, ".help").textContent = helpOf(field);
  select.setAttribute("aria-label", `Unit of ${field.label}`);
  fillUnits(select, info);
  select.addEventListener("change", () => pick(select.value));
  return { root, select };
}

/**
 * A cell of the open row. Its label is read out with that of its row.
 * @param {Column} column @param {[row: string, index: string]} ids @param {(value: string) => void} changed
 */
export function makeCell(column, [row, index], changed) {
  const { field } = column;
  const { kind } = field;
  const cell = copy(kind.type === "choice" ? "t-pick" : "t-cell");
  const box = /** @type {Control} */ (within(cell, "input, select"));
  const label = /** @type {HTMLLabelElement} */ (within(cell, "label"));
  box.id = `${row}-${index}`;
  label.htmlFor = box.id;
  label.id = `${box.id}-label`;
  label.textContent = heading(column);
  box.setAttribute("aria-labelledby", `${label.id} ${row}`);
  box.setAttribute("aria-describedby", `${row}-help ${row}-wrong`);
  cell.dataset.group = field.group;
  cell.hidden = !column.asked;
  cell.classList.toggle("figures", kind.type === "number");
  cell.classList.toggle("spare", column === SPARE);
  const told = () => changed(box.value);
  if (box instanceof HTMLInputElement) {
    const sign = within(cell, ".sign");
    box.inputMode = kind.type === "number" ? "decimal" : "text";
    box.addEventListener("input", told);
    sign.hidden = kind.type !== "number" || !kind.negative;
    startSign(sign, box, told);
  } else if (kind.type === "choice") {
    const assumed = optionOf(field, field.default)?.label;
    const none = assumed ? `${assumed} (assumed)` : field.required ? "Choose" : "Not given";
    box.append(new Option(none, ""), ...kind.options.map(({ value, label: said }) => new Option(said, value)));
    box.addEventListener("change", told);
  }
  return { cell, box };
}

/** A row that is closed, to be copied. @param {readonly Column[]} columns */
export function closedPattern(columns) {
  const li = copy("t-row");
  within(li, ".brief").append(...columns.map(({ field }) => {
    const span = document.createElement("span");
    span.dataset.l = field.label;
    span.classList.toggle("figures", field.kind.type === "number");
    span.classList.toggle("long", field.example.length > 6);
    span.classList.toggle("stamped", field.aid === "stamped");
    return span;
  }), document.createElement("span"));
  return li;
}

/** Leaves the columns in sight that are asked. @param {HTMLElement} root @param {readonly Column[]} columns
 * @param {Iterable<Element>[]} parts of the columns, by turns */
export function showAsked(root, columns, parts) {
  const seen = columns.filter(({ asked }) => asked);
  const many = seen.length > MANY;
  const widths = seen.map(({ field: { kind, group } }) =>
    `minmax(0, ${(kind.type === "text" ? 1.25 : 1) * (many && group ? 0.7 : 1)}fr)`);
  root.style.setProperty("--grid", widths.join(" "));
  root.classList.toggle("many", many);
  for (const part of parts) {
    [...part].forEach((each, at) => { /** @type {HTMLElement} */ (each).hidden = !columns[at % columns.length]?.asked; });
  }
}

/** What is wrong with a row, said at it. @param {HTMLElement} li @param {import("./core.js").Problem[]} problems
 * @param {import("./field.js").Around["fix"]} fix */
export function showWrong(li, problems, fix) {
  li.classList.toggle("bad", problems.length > 0);
  within(li, ".wrongs").replaceChildren(...problems.map((problem) => {
    const wrong = copy("t-wrong");
    within(wrong, "p").textContent = problem.message;
    fixKeys(within(wrong, ".keys"), problem.fixes, fix);
    return wrong;
  }));
  const columns = problems.map(({ cell }) => String(cell?.column));
  li.dataset.wrong = columns.join(" ");
  [...within(li, ".brief").children].forEach((span, index) => {
    span.classList.toggle("off", index > 0 && columns.includes(String(index - 1)));
  });
}
