// The fields of a question, made from the catalogue. A kind of field is one maker in `MAKERS`; none knows a name.
import { byId, copy, fixKeys, within } from "./dom.js";
import { dress, fillUnits, infoOf, isAsked, startSign, unitName, usualUnit } from "./field.js";
import { tableBox } from "./table.js";

/** @typedef {import("./field.js").Field} Field */
/** @typedef {import("./field.js").Entry} Entry */
/** @typedef {import("./field.js").Around} Around */
/** @typedef {import("./field.js").Box} Box */
/** @typedef {import("./field.js").Cell} Cell */
/** @typedef {import("./core.js").Read} Read */
/** @typedef {import("./core.js").Problem} Problem */
/** @typedef {(field: any, around: Around) => Box} Maker */

/** More options than these become a list instead of keys. */
const KEYS_AT_MOST = 5;

/** @type {Record<string, Maker>} */
const MAKERS = { number: numberBox, choice: choiceBox, text: textBox, table: tableBox };

/** @type {Maker} */
function numberBox(field, around) {
  const root = copy("t-number");
  const input = /** @type {HTMLInputElement} */ (within(root, "input"));
  const units = /** @type {HTMLSelectElement} */ (within(root, "select"));
  const sign = within(root, ".sign");
  const name = field.name;
  const unit = unitName(name);
  const info = infoOf(around.quantities, field);
  dress(root, field, input);
  input.name = name;
  units.name = unit;
  units.setAttribute("aria-label", `Unit of ${field.label}`);
  fillUnits(units, info);
  sign.hidden = !field.kind.negative;

  const typed = () => around.change({ [name]: input.value }, name);
  input.addEventListener("input", typed);
  units.addEventListener("change", () => around.change({ [unit]: units.value }, unit));
  startSign(sign, input, typed);
  return {
    field,
    root,
    target: () => input,
    write(entry) {
      const text = entry[name] ?? "";
      if (input.value !== text) input.value = text;
      units.value = entry[unit] || (info ? usualUnit(info, around.units()) : "");
    },
  };
}

/** @type {Maker} */
function textBox(field, around) {
  const root = copy("t-text");
  const input = /** @type {HTMLInputElement} */ (within(root, "input"));
  const name = field.name;
  dress(root, field, input);
  input.name = name;
  input.addEventListener("input", () => around.change({ [name]: input.value }, name));
  return {
    field,
    root,
    target: () => input,
    write(entry) {
      const text = entry[name] ?? "";
      if (input.value !== text) input.value = text;
    },
  };
}

/** @type {Maker} */
function choiceBox(field, around) {
  const { options } = /** @type {Extract<Field["kind"], { type: "choice" }>} */ (field.kind);
  const open = field.default || field.required ? [] : [{ value: "", label: "Not given" }];
  const choices = [...options, ...open];
  return options.length > KEYS_AT_MOST ? listBox(field, choices, around) : keysBox(field, choices, around);
}

/** @param {Field} field @param {{ value: string, label: string }[]} choices @param {Around} around @returns {Box} */
function keysBox(field, choices, around) {
  const root = copy("t-choice");
  const name = field.name;
  dress(root, field, root);
  const radios = choices.map(({ value, label }) => {
    const option = copy("t-option");
    const radio = /** @type {HTMLInputElement} */ (within(option, "input"));
    radio.name = name;
    radio.value = value;
    within(option, "span").textContent = label;
    // a click and not a change: confirming what is assumed is an entry too
    radio.addEventListener("click", () => around.change({ [name]: value }, name));
    within(root, ".choices").append(option);
    return radio;
  });
  return {
    field,
    root,
    target: () => /** @type {HTMLElement} */ (radios.find((radio) => radio.checked) ?? radios[0] ?? root),
    write(entry) {
      const value = entry[name] || field.default;
      for (const radio of radios) radio.checked = radio.value === value;
    },
  };
}

/** @param {Field} field @param {{ value: string, label: string }[]} choices @param {Around} around @returns {Box} */
function listBox(field, choices, around) {
  const root = copy("t-select");
  const select = /** @type {HTMLSelectElement} */ (within(root, "select"));
  const name = field.name;
  dress(root, field, select);
  select.name = name;
  if (field.required && !field.default) select.append(new Option("Choose", ""));
  select.append(...choices.map(({ value, label }) => new Option(label, value)));
  select.addEventListener("change", () => around.change({ [name]: select.value }, name));
  return {
    field,
    root,
    target: () => select,
    write(entry) { select.value = entry[name] || field.default; },
  };
}

/**
 * Builds the form of a question.
 * @param {readonly Field[]} fields @param {Around} around
 * @param {Record<string, boolean>} open which groups are open @param {() => void} onOpen
 */
export function buildForm(fields, around, open, onOpen) {
  const host = byId("fields");
  host.replaceChildren();
  /** @type {Map<string, HTMLDetailsElement>} */
  const groups = new Map();
  /** @type {Map<string, Box>} */
  const boxes = new Map();

  /** @param {string} heading */
  function group(heading) {
    if (heading === "") return host;
    let details = groups.get(heading);
    if (!details) {
      details = /** @type {HTMLDetailsElement} */ (copy("t-group"));
      within(details, "summary").textContent = heading;
      details.open = open[heading] === true;
      const made = details;
      details.addEventListener("toggle", () => {
        if (open[heading] === made.open) return;
        open[heading] = made.open;
        onOpen();
      });
      groups.set(heading, details);
    }
    return details;
  }

  for (const field of fields) {
    const make = MAKERS[field.kind.type];
    if (!make) throw new Error(`no kind of field ${field.kind.type}`);
    const box = make(field, around);
    boxes.set(field.name, box);
    group(field.group).append(box.root);
    box.root.addEventListener("focusout", (event) => {
      const to = event.relatedTarget;
      if (!(to instanceof Node && box.root.contains(to))) around.left(field.name);
    });
  }
  host.append(...groups.values());

  /** Those that can be reached now, in the order in which they are entered. */
  const reachable = () => [...host.querySelectorAll("input, select.wide, .new")].filter(
    (control) => !control.closest("details:not([open]), [hidden]"));

  host.onkeydown = (event) => {
    const at = event.target;
    if (event.defaultPrevented || event.key !== "Enter" || event.isComposing || !(at instanceof Element) || !at.matches("input")) return;
    event.preventDefault();
    const here = [...boxes.values()].find((box) => box.root.contains(at));
    const next = reachable().find((control) => !here?.root.contains(control)
      && at.compareDocumentPosition(control) & Node.DOCUMENT_POSITION_FOLLOWING);
    const box = next && [...boxes.values()].find((each) => each.root.contains(next));
    if (box) box.target().focus();
    else around.end();
    if (here) around.left(here.field.name); // a window in the background gets no focus events
  };

  return {
    boxes,
    /** @param {Entry} entry */
    write(entry) { for (const box of boxes.values()) box.write(entry); },
    /** Focuses a field, or a cell of it, opening its group. @param {string} name @param {Cell} [cell] */
    focus(name, cell) {
      const box = boxes.get(name);
      const details = box?.root.closest("details");
      if (details) details.open = true;
      if (cell) box?.cells?.focus(cell);
      else box?.target().focus();
    },
    /** Whether what is wrong there may be said while someone types. @param {string} name @param {Cell} cell */
    ripe: (name, cell) => boxes.get(name)?.cells?.ripe(cell) ?? true,
    /**
     * Shows how each field was read, and what is wrong with it where that may be said.
     * @param {Read[]} read @param {Problem[]} problems
     * @param {import("./core.js").Note[]} asks what is asked back
     * @param {import("./core.js").Booked[]} booked what is to be said at rows
     */
    tell(read, problems, asks, booked) {
      for (const { field, root, target, cells } of boxes.values()) {
        const mine = problems.filter((each) => each.field === field.name);
        root.hidden = !isAsked(field, read);
        cells?.tell(mine.filter((each) => each.cell), read);
        cells?.rows(booked.find((each) => each.field === field.name)?.rows ?? []);
        const problem = mine.find((each) => !each.cell);
        const error = within(root, ".error");
        error.hidden = !problem;
        within(error, "p").textContent = problem?.message ?? "";
        fixKeys(within(error, ".keys"), problem?.fixes ?? [], around.fix);
        if (target().matches("[type=text][name]")) target().setAttribute("aria-invalid", String(Boolean(problem)));
        root.classList.toggle("wrong", Boolean(problem));
        within(root, ".echo").textContent = read.find((each) => each.field === field.name)?.echo ?? "";
        const asked = asks.find((each) => each.fixes[0]?.field === field.name);
        const ask = within(root, ".ask");
        ask.hidden = !asked;
        within(ask, "p").textContent = asked?.text ?? "";
        fixKeys(within(ask, ".keys"), asked?.fixes ?? [], around.fix);
        const details = (mine.length > 0 || asked) && root.closest("details");
        if (details) details.open = true;
      }
    },
  };
}
