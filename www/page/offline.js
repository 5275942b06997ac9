// The offline copy and the offer of a new version. The page does all it can do without them too.
import { byId, say } from "./dom.js";

const HOURS_BETWEEN_CHECKS = 4;
const ANSWER_MS = 30_000; // a worker that has lost its copy fetches it first

/** @returns {ServiceWorkerContainer | undefined} */
const workers = () => (location.protocol === "file:" ? undefined : navigator.serviceWorker);

/** @param {ServiceWorker} worker @returns {Promise<{ version: string, complete: boolean }>} */
function counted(worker) {
  return new Promise((done, failed) => {
    const { port1, port2 } = new MessageChannel();
    port1.onmessage = (event) => done(event.data);
    setTimeout(() => failed(new Error("no answer")), ANSWER_MS);
    worker.postMessage("ready?", [port2]);
  });
}

/** Registers the worker. @param {() => Promise<unknown>} saveAll what to finish before the page is left */
export async function startOffline(saveAll) {
  const output = byId("offline");
  const container = workers();
  byId("repair").addEventListener("click", removeCopy);
  if (!container) {
    output.textContent = location.protocol === "file:"
      ? "This file needs no signal." : "No offline copy here: this browser, or this private window, keeps none.";
    return;
  }
  if (location.search === "?nosw") return removeCopy();
  const trusted = /** @type {any} */ (globalThis).trustedTypes?.createPolicy("sw", {
    createScriptURL: (/** @type {string} */ url) => { if (url !== "sw.js") throw new TypeError(url); return url; },
  });
  const controlled = container.controller !== null;
  try {
    const registration = await container.register(
      trusted ? trusted.createScriptURL("sw.js") : "sw.js", { updateViaCache: "none" });
    offer(registration, container, saveAll, controlled);
    const { active } = await container.ready;
    const said = active && await counted(active);
    if (!said?.complete) throw new Error("incomplete");
    output.textContent = "Works offline";
    document.documentElement.dataset.offline = "1";
  } catch {
    output.textContent = "Not yet offline: open the page again with signal.";
  }
}

/**
 * @param {ServiceWorkerRegistration} registration @param {ServiceWorkerContainer} container
 * @param {() => Promise<unknown>} saveAll @param {boolean} controlled whether a worker served this page
 */
function offer(registration, container, saveAll, controlled) {
  const button = byId("update");
  const show = () => { button.hidden = !registration.waiting || !registration.active; };
  const watch = () => registration.installing?.addEventListener("statechange", show);
  show();
  watch();
  registration.addEventListener("updatefound", watch);
  button.addEventListener("click", async () => {
    await saveAll();
    registration.waiting?.postMessage("skip");
  });
  let left = false;
  container.addEventListener("controllerchange", async () => {
    if (!controlled) { // the first worker's claim is no new version
      controlled = true;
      return;
    }
    if (left) return;
    left = true;
    await saveAll();
    location.reload();
  });
  let checked = Date.now();
  document.addEventListener("visibilitychange", () => {
    if (document.hidden || Date.now() - checked < HOURS_BETWEEN_CHECKS * 3_600_000) return;
    checked = Date.now();
    registration.update().catch(() => {}); // no signal is the usual case
  });
}

/** Takes the page's own copy away, not the entries. */
async function removeCopy() {
  for (const registration of await workers()?.getRegistrations() ?? []) await registration.unregister();
  for (const name of await caches.keys()) if (name.startsWith("farstaff-")) await caches.delete(name);
  delete document.documentElement.dataset.offline;
  byId("offline").textContent = "No offline copy: open the page again with signal.";
  say("The offline copy is removed. Open the page again with signal to get it back.");
}
