// The pieces of a table: what stands over a column, a cell that can be filled, a row that is closed.
import { copy, within } from "./dom.js";
import { fillUnits, helpOf, startSign } from "./field.js";
import { heading, optionOf } from "./rows.js";

/** @typedef {import("./rows.js").Column} Column */
/** @typedef {HTMLInputElement | HTMLSelectElement} Control */

/** @type {Column} a cell beyond the last column: it is kept until the person clears it */
export const SPARE = {
  field: {
    name: "", label: "One cell too many", help: "", kind: { type: "text", most: 0, why: "" }, default: "", example: "",
    required: false, shared: false, group: "",
  },
  unitName: "",
  info: undefined,
  unit: "",
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
    return span;
  }), document.createElement("span"));
  return li;
}
