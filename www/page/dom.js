// The few things every part of the page does with the markup. All of it stands in index.html; here it is only copied
// and filled with text.

/** @param {string} id @returns {HTMLElement} */
export function byId(id) {
  const found = document.getElementById(id);
  if (!found) throw new Error(`no element ${id}`);
  return found;
}

/** The first element within `root` that matches. @param {ParentNode} root @param {string} selector */
export function within(root, selector) {
  const found = root.querySelector(selector);
  if (!found) throw new Error(`nothing matches ${selector}`);
  return /** @type {HTMLElement} */ (found);
}

/** A copy of the template's only element. @param {string} id */
export function copy(id) {
  const template = /** @type {HTMLTemplateElement} */ (byId(id));
  return /** @type {HTMLElement} */ (template.content.firstElementChild?.cloneNode(true));
}

/**
 * Writes a text where the markup has a place for it, and hides the place where there is none.
 * @param {ParentNode} root @param {string} place @param {string} text
 */
export function fill(root, place, text) {
  const element = within(root, `[data-x="${place}"]`);
  element.textContent = text;
  element.hidden = text === "";
}

/**
 * Keys for what may have been meant.
 * @param {HTMLElement} host
 * @param {import("./core.js").Fix[]} fixes
 * @param {(fix: import("./core.js").Fix) => void} apply
 */
export function fixKeys(host, fixes, apply) {
  host.replaceChildren(...fixes.map((fix) => key(fix.label, () => apply(fix))));
  host.hidden = fixes.length === 0;
}

/** @param {string} words @param {() => void} act */
export function key(words, act) {
  const button = copy("t-key");
  button.textContent = words;
  button.addEventListener("click", act);
  return button;
}

/**
 * Says something that the person has to know and may act on.
 * @param {string} text @param {Record<string, () => void>} [keys]
 */
export function say(text, keys = {}) {
  const host = byId("messages");
  for (const old of host.children) if (old.querySelector("p")?.textContent === text) old.remove();
  const message = copy("t-message");
  fill(message, "text", text);
  const close = within(message, "[data-x=close]");
  close.addEventListener("click", () => message.remove());
  close.before(...Object.entries(keys).map(([words, act]) => key(words, () => { message.remove(); act(); })));
  host.append(message);
}

const HELD_MS = 1000;

/** Brings an element into view and keeps it there while what lies above takes its height, until the person moves on.
 * @param {HTMLElement} element */
export function hold(element) {
  const end = performance.now() + HELD_MS;
  let free = false;
  for (const event of ["pointerdown", "keydown", "wheel"]) {
    addEventListener(event, () => { free = true; }, { once: true, passive: true });
  }
  const show = () => {
    if (free) return;
    element.scrollIntoView({ block: "center" });
    if (performance.now() < end) requestAnimationFrame(show);
  };
  show();
}

/** Makes a change and keeps in its place what has the focus: WebKit lets it go when what lies above changes its height.
 * @param {HTMLElement} inside @param {() => void} change */
export function steady(inside, change) {
  const at = inside.contains(document.activeElement) ? document.activeElement : null;
  const before = at?.getBoundingClientRect().top ?? 0;
  change();
  const keep = () => {
    const moved = at && at === document.activeElement ? at.getBoundingClientRect().top - before : 0;
    if (moved !== 0) scrollBy(0, moved);
  };
  keep();
  if (before > 0 && before < innerHeight) requestAnimationFrame(keep); // some heights follow a frame late
}

/** Hands a text to the person as a file. @param {string} name @param {string} text @param {string} [type] */
export function download(name, text, type = "text/plain") {
  const link = document.createElement("a");
  link.href = URL.createObjectURL(new Blob([text], { type }));
  link.download = name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), 60_000);
}
