const VERSION = "@@VERSION@@";
const FILES = [["@@FILES@@", ""]];
// The offline copy: one cache per build, filled whole or not at all, never touched after that. The build writes the two
// lines above: FILES holds each file's path ("" is the page itself) with the digest its bytes must have.
const sw = /** @type {ServiceWorkerGlobalScope} */ (/** @type {unknown} */ (self));
const OURS = "farstaff-";
const NAME = OURS + VERSION;
const PAGE = new URL("./", sw.registration.scope).href;

async function fill() {
  await caches.delete(NAME); // leftovers of an install that was killed
  const cache = await caches.open(NAME);
  try {
    // A stale or half-deployed file fails its digest, the whole install fails, and the old version stays in charge.
    await cache.addAll(FILES.map(([path, integrity]) => new Request(new URL(path ?? "", PAGE), {
      cache: "reload", credentials: "omit", redirect: "error", integrity: integrity ?? "",
    })));
  } catch (error) {
    await caches.delete(NAME);
    throw error;
  }
}

async function takeOver() {
  for (const key of await caches.keys()) if (key.startsWith(OURS) && key !== NAME) await caches.delete(key);
  await sw.clients.claim(); // the first visit becomes controlled without a reload
}

/** @param {Request} request */
async function serve(request) {
  const cache = await caches.open(NAME);
  const page = request.mode === "navigate";
  const kept = await cache.match(page ? PAGE : request, { ignoreSearch: !page, ignoreVary: true });
  // With the page kept, a part from the network would mix versions. Some browsers drop a copy and leave its worker.
  return kept ?? (page || !await cache.match(PAGE) ? fetch(request) : Response.error());
}

async function complete() {
  return (await (await caches.open(NAME)).keys()).length === FILES.length;
}

/** Says whether the copy is whole, and fills it again where it was dropped. @param {MessagePort | undefined} port */
async function count(port) {
  if (!await complete()) await fill().catch(() => {});
  port?.postMessage({ version: VERSION, complete: await complete() });
}

sw.addEventListener("install", (event) => event.waitUntil(fill()));
sw.addEventListener("activate", (event) => event.waitUntil(takeOver()));
sw.addEventListener("fetch", (event) => {
  const { request } = event;
  if (request.method !== "GET" || new URL(request.url).origin !== sw.location.origin) return;
  event.respondWith(serve(request));
});
sw.addEventListener("message", (event) => {
  if (event.data === "skip") event.waitUntil(sw.skipWaiting());
  if (event.data === "ready?") event.waitUntil(count(event.ports[0]));
});
