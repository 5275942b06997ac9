// Offers the home screen, once, when there is something worth keeping.
import { byId } from "./dom.js";
import { isRemembered, remember } from "./settings.js";

/** @type {Event & { prompt?: () => void } | undefined} */
let offered;

export function startHint() {
  addEventListener("beforeinstallprompt", (event) => { event.preventDefault(); offered = event; });
  byId("install").addEventListener("click", () => { offered?.prompt?.(); close(); });
  byId("hint-close").addEventListener("click", close);
}

function close() {
  remember("hint", "seen");
  byId("hint").hidden = true;
}

/** After an answer. */
export function hint() {
  // only the iPhone's browser has this property, and only there is it false outside the home screen
  const iphone = /** @type {any} */ (navigator).standalone === false;
  if (isRemembered("hint") || !(iphone || offered)) return;
  byId("hint").hidden = false;
  byId("hint-ios").hidden = !iphone;
  byId("hint-other").hidden = iphone;
  byId("install").hidden = !offered;
}
