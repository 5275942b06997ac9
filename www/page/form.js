// The fields of a question, made from the catalogue. A kind of field is one maker in `MAKERS`; none knows a name.
import { byId, copy, fixKeys, within } from "./dom.js";

/** @typedef {import("./core.js").Field} Field */
/** @typedef {import("./core.js").Fix} Fix */
/** @typedef {import("./core.js").Read} Read */
/** @typedef {import("./core.js").QuantityInfo} QuantityInfo */
/** @typedef {import("./core.js").Problem} Problem */
/** @typedef {Record<string, string>} Entry */
/**
 * What a form needs to know of the rest.
 * @typedef {object} Around
 * @property {readonly QuantityInfo[]} quantities
 * @property {() => string} units the choice of units in force
 * @property {(patch: Entry, step: string) => void} change texts by name; changes of one step are undone together
 * @property {(name: string) => void} left a field is done with, for now
 * @property {(fix: Fix) => void} fix
 * @property {() => void} end Enter in the last field
 */
/**
 * One field on the page.
 * @typedef {object} Box
 * @property {Field} field
 * @property {HTMLElement} root
 * @property {(entry: Entry) => void} write shows an entry
 * @property {() => HTMLElement} target what is focused
 */
/** @typedef {(field: any, around: Around) => Box} Maker */

/** More options than these become a list instead of keys. */
const KEYS_AT_MOST = 5;

/** @type {Record<string, Maker>} */
const MAKERS = { number: numberBox, choice: choiceBox };

/** Name under which the unit picked beside a box travels. @param {string} name */
export const unitName = (name) => `${name}.unit`;

/** The unit a bare number has. @param {QuantityInfo} info @param {string} units */
export const usualUnit = (info, units) => /** @type {any} */ (info)[units] ?? info.metric;

/**
 * Label, help, error and echo, and what ties them to the control.
 * @param {HTMLElement} root @param {Field} field @param {HTMLElement} control
 */
function dress(root, field, control) {
  const id = `field-${field.name}`;
  const label = within(root, "label, legend");
  label.textContent = field.label;
  const left = field.default && field.kind.type === "number" ? `Left empty: ${field.default}.` : "";
  const help = within(root, ".help");
  help.textContent = [field.help, left].filter(Boolean).join(" ");
  help.hidden = help.textContent === "";
  help.id = `${id}-help`;
  within(root, ".error p").id = `${id}-error`;
  within(root, ".echo").id = `${id}-echo`;
  control.setAttribute("aria-describedby", `${id}-help ${id}-error ${id}-echo`);
  if (label instanceof HTMLLabelElement) {
    control.id = id;
    label.htmlFor = id;
  }
}

/** @type {Maker} */
function numberBox(field, around) {
  const root = copy("t-number");
  const input = /** @type {HTMLInputElement} */ (within(root, "input"));
  const units = /** @type {HTMLSelectElement} */ (within(root, "select"));
  const sign = within(root, ".sign");
  const name = field.name;
  const unit = unitName(name);
  const info = around.quantities.find((each) => each.name === field.kind.quantity);
  dress(root, field, input);
  input.name = name;
  units.name = unit;
  units.setAttribute("aria-label", `Unit of ${field.label}`);
  // Closed, the list shows the symbol only; opened, the words too, so that k and m are not taken for each other.
  const options = (info?.units ?? []).map(({ symbol, label }) => {
    const option = new Option(symbol, symbol);
    units.addEventListener("pointerdown", () => { option.text = `${symbol}  (${label})`; });
    units.addEventListener("focus", () => { option.text = `${symbol}  (${label})`; });
    for (const event of ["blur", "change"]) units.addEventListener(event, () => { option.text = symbol; });
    return option;
  });
  units.append(...options);
  units.hidden = options.length === 0;
  sign.hidden = !field.kind.negative;

  input.addEventListener("input", () => around.change({ [name]: input.value }, name));
  units.addEventListener("change", () => around.change({ [unit]: units.value }, unit));
  sign.addEventListener("pointerdown", (event) => event.preventDefault()); // keeps focus and keyboard where they are
  sign.addEventListener("click", () => {
    const text = input.value.trim();
    input.value = /^[-−–]/.test(text) ? text.slice(1).trimStart() : `−${text}`;
    around.change({ [name]: input.value }, name);
  });
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
  const reachable = () => [...host.querySelectorAll("input, select.wide")].filter(
    (control) => !control.closest("details:not([open])"));

  host.onkeydown = (event) => {
    const at = event.target;
    if (event.key !== "Enter" || event.isComposing || !(at instanceof Element) || !at.matches("input")) return;
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
    /** Focuses a field, opening its group. @param {string} name */
    focus(name) {
      const box = boxes.get(name);
      const details = box?.root.closest("details");
      if (details) details.open = true;
      box?.target().focus();
    },
    /**
     * Shows how each field was read, and what is wrong with it where that may be said.
     * @param {Read[]} read @param {Problem[]} problems
     */
    tell(read, problems) {
      for (const { field, root, target } of boxes.values()) {
        const problem = problems.find((each) => each.field === field.name);
        const error = within(root, ".error");
        error.hidden = !problem;
        within(error, "p").textContent = problem?.message ?? "";
        fixKeys(within(error, ".keys"), problem?.fixes ?? [], around.fix);
        if (field.kind.type === "number") target().setAttribute("aria-invalid", String(Boolean(problem)));
        root.classList.toggle("wrong", Boolean(problem));
        within(root, ".echo").textContent = read.find((each) => each.field === field.name)?.echo ?? "";
        const details = problem && root.closest("details");
        if (details) details.open = true;
      }
    },
  };
}
