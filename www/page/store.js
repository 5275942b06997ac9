// What the person entered, kept on this device: one record for the site and one per question, in IndexedDB.
// A write counts only once it is on disk. Nothing is ever thrown away unasked: what cannot be read is kept aside.

const NAME = "farstaff";
const SCHEMA = 1;
const FORM = 1; // of a record
const LATE = "farstaff-late"; // what was not on disk yet when the page went out of sight

/** @typedef {Record<string, string>} Entry */
/**
 * @typedef {object} Kept
 * @property {string} id
 * @property {number} form
 * @property {number} rev
 * @property {Entry} entry
 * @property {Entry[]} undo
 * @property {Entry[]} redo
 * @property {Record<string, boolean>} open
 * @property {number} [when] the entry was last written, milliseconds by this device's clock
 * @property {{ field: string, row: number }} [place] the row of a table at which the person stood
 */
/** @typedef {{ id: string, aside: true, why: string, text: string }} Aside */

/** @type {Promise<IDBDatabase> | null} */
let opening = null;
/** @type {Map<string, Kept>} */
const records = new Map();
/** @type {Aside[]} */
export const asides = [];
/** @type {Set<string>} */
const unsaved = new Set();
/** @type {Promise<void> | null} */
let writing = null;
let writes = ""; // id of the record that is being written
/** @type {(trouble: unknown) => void} */
let onTrouble = () => {};
/** @type {BroadcastChannel | null} */
let tabs = null;

/** @returns {Promise<IDBDatabase>} */
function open() {
  return opening ??= new Promise((done, failed) => {
    const request = indexedDB.open(NAME, SCHEMA);
    request.onupgradeneeded = (event) => { // additive steps only
      if (event.oldVersion < 1) request.result.createObjectStore("records", { keyPath: "id" });
    };
    request.onerror = () => { opening = null; failed(request.error); };
    request.onsuccess = () => {
      const db = request.result;
      db.onversionchange = () => { db.close(); opening = null; }; // lets another tab's newer page move on
      db.onclose = () => { opening = null; };
      done(db);
    };
  });
}

/** iOS drops connections in the background. @param {unknown} error */
const dropped = (error) => error instanceof DOMException && /InvalidState|Unknown/.test(error.name);

/**
 * Runs `work` in one transaction and settles when that is on disk, or undone as a whole.
 * @template T
 * @param {IDBTransactionMode} mode
 * @param {(store: IDBObjectStore) => { result?: T } | void} work
 * @returns {Promise<T | undefined>}
 */
async function transact(mode, work, again = true) {
  let db;
  try {
    const live = db = await open();
    return await new Promise((done, failed) => {
      const transaction = live.transaction("records", mode, { durability: "strict" });
      /** @type {{ result?: T } | void} */
      let out;
      transaction.oncomplete = () => done(out?.result);
      // a full disk arrives here and not at the request
      transaction.onabort = () => failed(transaction.error ?? new DOMException("aborted", "AbortError"));
      out = work(transaction.objectStore("records"));
    });
  } catch (error) {
    if (!again || !dropped(error)) throw error;
    db?.close();
    opening = null;
    return transact(mode, work, false);
  }
}

/** @param {unknown} value @returns {value is Entry} */
const isEntry = (value) => typeof value === "object" && value !== null && !Array.isArray(value)
  && Object.values(value).every((text) => typeof text === "string");

/** @param {any} value @returns {value is Kept} */
const isKept = (value) => value.form === FORM && Number.isSafeInteger(value.rev) && isEntry(value.entry)
  && [value.undo, value.redo].every((list) => Array.isArray(list) && list.every(isEntry))
  && typeof value.open === "object" && value.open !== null;

/** @param {unknown} value */
const asText = (value) => {
  try { return JSON.stringify(value, null, 1) ?? String(value); } catch { return String(value); }
};

/**
 * Reads everything there is. Problems are told through `trouble`; the page works without a store too.
 * @param {{ trouble: (error: unknown) => void, damaged: () => void, changed: (id: string) => void }} tell
 */
export async function openStore(tell) {
  onTrouble = tell.trouble;
  /** @type {any[]} */
  let all = [];
  try {
    const read = () => transact("readonly", (store) => store.getAll());
    all = await read().catch(read) ?? []; // right after a crash the first attempt may fail
  } catch (error) {
    tell.trouble(error);
    return;
  }
  for (const [event, on] of /** @type {const} */ ([["pagehide", globalThis], ["visibilitychange", document]])) {
    on.addEventListener(event, keepLate);
  }
  for (const value of all) {
    if (value.aside === true && typeof value.text === "string") asides.push(value);
    else if (isKept(value)) records.set(value.id, value);
    else {
      keepAside(`a damaged record, ${value.id}`, asText(value), value.id);
      tell.damaged();
    }
  }
  takeLate();
  if (typeof BroadcastChannel === "function") {
    tabs = new BroadcastChannel(NAME);
    tabs.onmessage = async ({ data: id }) => {
      if (typeof id !== "string" || unsaved.has(id)) return;
      const value = await transact("readonly", (store) => store.get(id)).catch(() => undefined);
      if (value && isKept(value)) Object.assign(record(id), value);
      if (value) tell.changed(id);
    };
  }
}

/** A tab that closes ends a write that is under way, but not this one, which is over when it returns. */
function keepLate() {
  const late = [...new Set([...unsaved, writes])].filter(Boolean).map((id) => record(id));
  try {
    if (late.length > 0) localStorage.setItem(LATE, JSON.stringify(late));
  } catch { /* no room, or no such store: then the write under way is all there is */ }
}

function forgetLate() {
  try {
    localStorage.removeItem(LATE);
  } catch { /* no such store */ }
}

/** Brings back what [keepLate] kept, on top of what the disk had by then. */
function takeLate() {
  /** @type {unknown} */
  let late;
  try {
    late = JSON.parse(localStorage.getItem(LATE) ?? "[]");
  } catch { /* nothing that could be read */ }
  if (!Array.isArray(late)) return;
  for (const value of late.filter(isKept)) {
    const rev = records.get(value.id)?.rev ?? 0;
    if (rev > value.rev + 1) continue; // another tab has gone on since
    records.set(value.id, { ...value, rev });
    save(record(value.id));
  }
}

/** The record of that id; an empty one where there is none yet. @param {string} id @returns {Kept} */
export function record(id) {
  let kept = records.get(id);
  if (!kept) {
    kept = { id, form: FORM, rev: 0, entry: {}, undo: [], redo: [], open: {} };
    records.set(id, kept);
  }
  return kept;
}

/** Every record whose id starts so. @param {string} start */
export const recordsOf = (start) => [...records.values()].filter((kept) => kept.id.startsWith(start));

/** Puts the record on disk; settles when it and all before it are there. @param {Kept} kept */
export function save(kept) {
  unsaved.add(kept.id);
  return writing ??= write().finally(() => { writing = null; });
}

/** Settles when all is on disk that can be. */
export const saved = () => writing ?? Promise.resolve();

async function write() {
  try {
    for (const id of unsaved) {
      unsaved.delete(id); // typing on while this is written puts it back
      writes = id;
      try {
        await put(record(id));
      } catch (error) {
        unsaved.add(id);
        throw error;
      }
    }
    writes = "";
    forgetLate();
  } catch (error) {
    onTrouble(error);
  }
}

/** @param {Kept} kept */
async function put(kept) {
  // Texts do not change, and states to come back to neither: typing on changes only the entry itself.
  const copied = { ...kept, entry: { ...kept.entry }, undo: [...kept.undo], redo: [...kept.redo], open: { ...kept.open } };
  await transact("readwrite", (store) => {
    const old = store.get(kept.id);
    old.onsuccess = () => {
      const theirs = old.result;
      if (theirs && theirs.rev !== copied.rev) { // another tab wrote in between: both are kept
        const aside = asideOf("changed in another tab as well", asText(theirs));
        asides.push(aside);
        store.put(aside);
        copied.rev = Math.max(copied.rev, Number(theirs.rev) || 0);
      }
      copied.rev += 1;
      store.put(copied);
    };
  });
  kept.rev = copied.rev;
  tabs?.postMessage(kept.id);
}

/** @param {string} why @param {string} text @returns {Aside} */
const asideOf = (why, text) =>
  ({ id: `aside-${Date.now()}-${Math.random().toString(36).slice(2)}`, aside: true, why, text });

/**
 * Keeps a text that could not be read, and takes the record it came from out of the way.
 * @param {string} why @param {string} text @param {IDBValidKey} [from]
 */
export function keepAside(why, text, from) {
  const aside = asideOf(why, text);
  asides.push(aside);
  transact("readwrite", (store) => {
    store.put(aside);
    if (from !== undefined) store.delete(from);
  }).catch(onTrouble);
}

/** Everything kept aside, as one text. */
export const asideText = () => asides.map((aside) => `${aside.why}\n${aside.text}\n`).join("\n");

/** Lets go of what was kept aside. */
export function dropAsides() {
  const ids = asides.splice(0).map((aside) => aside.id);
  return transact("readwrite", (store) => { for (const id of ids) store.delete(id); }).catch(onTrouble);
}
