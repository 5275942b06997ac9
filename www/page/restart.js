// The calculator never stops by itself, but a browser that compiles it wrongly stops it in mid-answer. The page then starts
// anew, once: what was entered is on disk. An old decision must not stay beside a new entry meanwhile.
import { byId, say } from "./dom.js";
import { saved } from "./store.js";

const KEY = "farstaff-restarted";
const AGAIN_MS = 60_000;

/** @param {unknown} error */
async function trapped(error) {
  if (!(error instanceof WebAssembly.RuntimeError)) return;
  byId("question").hidden = true;
  const last = Number(sessionStorage.getItem(KEY));
  await saved();
  if (Date.now() - last < AGAIN_MS) {
    say("The calculator stops in this browser. What you typed is kept. Try another browser, or reload the page.");
    return;
  }
  sessionStorage.setItem(KEY, String(Date.now()));
  history.replaceState({ own: true }, "", location.href); // a link was followed already
  location.reload();
}

/** Watches for it from now on. */
export function startRestart() {
  addEventListener("error", ({ error }) => trapped(error));
  addEventListener("unhandledrejection", ({ reason }) => trapped(reason));
}
