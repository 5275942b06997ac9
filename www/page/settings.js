// How the page looks and lies in the hand: tiny, read at once, so that the first picture is right.

/** @param {string} name */
function remembered(name) {
  try { return localStorage.getItem(`farstaff-${name}`); } catch { return null; }
}

/** @param {string} name @param {string} value */
export function remember(name, value) {
  try { localStorage.setItem(`farstaff-${name}`, value); } catch { /* it holds until the page is closed */ }
}

/** @param {string} name */
export const isRemembered = (name) => remembered(name) !== null;

/** Applies the settings and follows their switches. */
export function startSettings() {
  const root = document.documentElement;
  for (const name of ["theme", "hand"]) {
    const radios = /** @type {NodeListOf<HTMLInputElement>} */ (document.querySelectorAll(`input[name="${name}"]`));
    const kept = remembered(name);
    for (const radio of radios) {
      if (radio.value === kept) radio.checked = true;
      if (radio.checked) root.dataset[name] = radio.value;
      radio.addEventListener("change", () => {
        root.dataset[name] = radio.value;
        remember(name, radio.value);
        tint();
      });
    }
  }
  tint();
}

/** Colours the browser's own bar like the page. */
function tint() {
  const paper = getComputedStyle(document.documentElement).getPropertyValue("--paper").trim();
  document.querySelector("meta[name=theme-color]")?.setAttribute("content", paper);
}
