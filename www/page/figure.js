// Draws a figure from shares of its width and height: plain lines in the ink of the page, told apart by weight, dash
// and hatch. All arithmetic here is on pixels.

import { byId } from "./dom.js";

/** @typedef {import("./core.js").Figure} Figure */
/** @typedef {import("./core.js").Mark} Mark */
/** @typedef {{ left: number, top: number, right: number, bottom: number }} Area */

const SVG = "http://www.w3.org/2000/svg";
const TEXT = 16; // px, as everywhere at least
const GAP = 6;
const pen = document.createElement("canvas").getContext("2d");

/** Width of the drawing, px. Kept, as measuring it while the page is rewritten costs a layout. */
let width = 0;
let redraw = () => {};
const follow = new ResizeObserver(([entry]) => {
  const now = Math.round(entry?.contentRect.width ?? 0);
  if (now === 0 || now === width) return;
  width = now;
  redraw();
});

/** @param {string} text */
function widthOf(text) {
  if (!pen) return text.length * TEXT * 0.6;
  pen.font = `600 ${TEXT}px system-ui, sans-serif`;
  return pen.measureText(text).width;
}

/** @param {string} name @param {Record<string, string | number>} attributes @param {(Node | string)[]} inside */
function svg(name, attributes, ...inside) {
  const element = document.createElementNS(SVG, name);
  for (const [key, value] of Object.entries(attributes)) element.setAttribute(key, String(value));
  element.append(...inside);
  return element;
}

/** @param {string} content @param {number} left @param {number} middle @param {string} weight */
const text = (content, left, middle, weight) =>
  svg("text", { x: left, y: middle + TEXT * 0.35, class: weight }, content);

/** @param {Area} one @param {Area} other */
const meet = (one, other) => one.left < other.right && other.left < one.right
  && one.top < other.bottom && other.top < one.bottom;

/** @param {readonly (readonly [number, number])[]} points */
const path = (points) => points.map(([x, y], i) => `${i ? "L" : "M"}${x.toFixed(1)} ${y.toFixed(1)}`).join("");

/** A hatched area; each further band leans the other way. @param {number} index */
function hatch(index) {
  const lean = index % 2 ? "M0 0L8 8M-2 6L2 10M6 -2L10 2" : "M0 8L8 0M-2 2L2 -2M6 10L10 6";
  return svg("pattern", { id: `hatch-${index}`, width: 8, height: 8, patternUnits: "userSpaceOnUse" },
    svg("path", { d: lean, class: "hatch" }));
}

/** @param {string} words @param {Element[]} sample */
function legendItem(words, ...sample) {
  const item = document.createElement("li");
  const key = svg("svg", { viewBox: "0 0 44 20", width: 44, height: 20, "aria-hidden": "true" }, ...sample);
  item.append(key, words);
  return item;
}

/**
 * @param {Figure} figure @param {HTMLElement} host where the drawing goes; its width is the drawing's
 * @param {HTMLElement} legend
 */
export function drawFigure(figure, host, legend) {
  width ||= host.clientWidth || 560;
  follow.observe(host);
  redraw = () => drawFigure(figure, host, legend);
  const height = Math.round(Math.min(380, Math.max(230, width * 0.62)));
  const gutter = Math.max(0, ...figure.y.ticks.map((tick) => widthOf(tick.text))) + GAP + 4;
  const plot = { left: gutter, top: 12, right: width - 10, bottom: height - TEXT - 14 };
  const x = (/** @type {number} */ share) => plot.left + share * (plot.right - plot.left);
  const y = (/** @type {number} */ share) => plot.bottom - share * (plot.bottom - plot.top);
  /** @type {Area[]} */
  const taken = [];
  /** @type {Element[]} */
  const words = [];
  /** @type {HTMLElement[]} */
  const items = [];

  /** Writes where nothing stands yet, and says whether there was room.
   * @param {string} content @param {[number, number][]} places left and middle of the text @param {Area} room */
  function write(content, places, room, weight = "") {
    const wide = widthOf(content);
    for (const [left, middle] of places) {
      const area = { left: left - 2, right: left + wide + 2, top: middle - TEXT * 0.6, bottom: middle + TEXT * 0.6 };
      const inside = area.left >= room.left && area.right <= room.right && area.top >= room.top
        && area.bottom <= room.bottom;
      if (!inside || taken.some((other) => meet(area, other))) continue;
      taken.push(area);
      words.push(text(content, left, middle, weight));
      return true;
    }
    return false;
  }

  const page = { left: 0, top: 0, right: width, bottom: height };
  const grid = [];
  for (const tick of figure.y.ticks) {
    const at = Math.max(TEXT * 0.6, y(tick.at));
    grid.push(svg("path", { d: path([[plot.left - 4, y(tick.at)], [plot.right, y(tick.at)]]), class: "grid" }));
    write(tick.text, [[plot.left - GAP - 2 - widthOf(tick.text), at]], page);
  }
  for (const tick of figure.x.ticks) {
    const half = widthOf(tick.text) / 2;
    const left = Math.min(width - 2 * half - 2, Math.max(2, x(tick.at) - half));
    grid.push(svg("path", { d: path([[x(tick.at), plot.bottom + 4], [x(tick.at), plot.top]]), class: "grid" }));
    write(tick.text, [[left, height - TEXT * 0.7]], page);
  }

  const bands = figure.bands.map((band, index) => {
    const edge = (/** @type {number[]} */ list) =>
      band.x.map((at, i) => /** @type {const} */ ([x(at), y(list[i] ?? 0)]));
    const fill = `url(#hatch-${index})`;
    items.push(legendItem(band.name, svg("rect", { x: 1, y: 2, width: 42, height: 16, fill, class: "band" })));
    return svg("path", { d: `${path([...edge(band.high), ...edge(band.low).reverse()])}Z`, fill, class: "band" });
  });
  const lines = figure.series.map((series) => {
    items.push(legendItem(series.name, svg("path", { d: "M1 10H43", class: `stroke ${series.stroke}` })));
    const points = series.x.map((at, i) => /** @type {const} */ ([x(at), y(series.y[i] ?? 0)]));
    taken.push(...along(points));
    return svg("path", { d: path(points), class: `stroke ${series.stroke}` });
  });

  let letter = 0;
  const drawn = figure.marks.map((mark) => ({ mark, ...drawMark(mark, x, y, plot) }));
  for (const { line } of drawn) taken.push(...along(line));
  for (const { mark, places } of drawn) {
    if (mark.type === "staff" || mark.label === "") continue;
    // words beside the mark where they fit, else a letter there and the words below the drawing
    if (write(mark.label, places(widthOf(mark.label)), plot, "label")) continue;
    const name = String.fromCharCode(65 + letter);
    letter += 1;
    const spots = places(widthOf(name));
    if (!write(name, spots, page, "label")) words.push(text(name, ...spots[0] ?? [plot.left, plot.top], "label"));
    items.push(legendItem(mark.label, svg("text", { x: 16, y: 16, class: "label" }, name)));
  }

  const inside = svg("g", { "clip-path": "url(#plot)" }, ...bands, ...lines);
  const clip = svg("clipPath", { id: "plot" }, svg("rect", {
    x: plot.left, y: plot.top, width: plot.right - plot.left, height: plot.bottom - plot.top,
  }));
  const frame = path([[plot.left, plot.top], [plot.left, plot.bottom], [plot.right, plot.bottom]]);
  host.replaceChildren(svg("svg", {
    viewBox: `0 0 ${width} ${height}`, role: "img", "aria-labelledby": "drawing-title drawing-text", class: "drawing",
  },
  svg("title", { id: "drawing-title" }, figure.title), svg("desc", { id: "drawing-text" }, figure.description),
  svg("defs", {}, clip, ...figure.bands.map((_, index) => hatch(index))),
  ...grid, inside, svg("path", { d: frame, class: "frame" }), ...drawn.flatMap(({ shapes }) => shapes), ...words));
  readOff(figure, host, x, plot);
  legend.replaceChildren(...items);
  legend.hidden = items.length === 0;
}

/**
 * A finger, a mouse or the arrow keys ask the picture what it says at one place; words and a line answer.
 * @param {Figure} figure @param {HTMLElement} host @param {(share: number) => number} x @param {Area} plot
 */
function readOff({ readings = [] }, host, x, plot) {
  const words = byId("read-off");
  const ask = words.dataset.ask ?? "";
  const cursor = svg("path", { class: "cursor", d: "" });
  host.firstElementChild?.append(cursor);
  words.hidden = readings.length === 0;
  words.textContent = ask;
  host.tabIndex = readings.length > 0 ? 0 : -1;
  let chosen = -1;
  /** @param {number} index */
  const show = (index) => {
    chosen = Math.max(0, Math.min(readings.length - 1, index));
    const reading = readings[chosen];
    if (!reading) return;
    cursor.setAttribute("d", path([[x(reading.at), plot.top], [x(reading.at), plot.bottom]]));
    words.textContent = reading.text;
  };
  /** @param {PointerEvent} event */
  const point = (event) => {
    if (event.type === "pointermove" && event.pointerType !== "mouse" && event.buttons === 0) return;
    const box = host.getBoundingClientRect();
    const at = (event.clientX - box.left) * (width / box.width);
    const far = readings.map((reading) => Math.abs(x(reading.at) - at));
    show(far.indexOf(Math.min(...far)));
  };
  host.onpointerdown = host.onpointermove = readings.length > 0 ? point : null;
  host.onkeydown = (event) => {
    const step = { ArrowLeft: -1, ArrowRight: 1, Home: -readings.length, End: readings.length }[event.key];
    if (step === undefined || readings.length === 0) return;
    event.preventDefault();
    show(chosen < 0 ? (step > 0 ? 0 : readings.length - 1) : chosen + step);
  };
}

/**
 * The shapes of a mark, the line that words keep clear of, and where words about it may stand, best first.
 * @typedef {object} Drawn
 * @property {Element[]} shapes
 * @property {[number, number][]} line
 * @property {(wide: number) => [number, number][]} places
 */
/**
 * @param {Mark} mark @param {(share: number) => number} x @param {(share: number) => number} y @param {Area} plot
 * @returns {Drawn}
 */
function drawMark(mark, x, y, plot) {
  const clear = TEXT * 0.9;
  if (mark.type === "level") {
    const at = y(mark.y);
    /** @type {[number, number][]} */
    const line = [[plot.left, at], [plot.right, at]];
    const places = (/** @type {number} */ wide) =>
      everywhere(steps(plot.left + GAP, plot.right - wide - GAP, 24), [at - clear, at + clear]);
    return { shapes: [svg("path", { d: path(line), class: "mark" })], line, places };
  }
  if (mark.type === "upright") {
    const at = x(mark.x);
    /** @type {[number, number][]} */
    const line = [[at, plot.bottom], [at, plot.top]];
    const heights = steps(plot.top + clear, plot.bottom - clear);
    const places = (/** @type {number} */ wide) => everywhere([at + GAP + 2, at - wide - GAP - 2], heights);
    return { shapes: [svg("path", { d: path(line), class: "mark" })], line, places };
  }
  if (mark.type === "point") {
    const [at, middle] = [x(mark.x), y(mark.y)];
    const heights = [1, -1, 1.8, -1.8, 3, -3].map((far) => middle - far * (clear + 4));
    return {
      shapes: [svg("circle", { cx: at, cy: middle, r: 5, class: "point" })],
      line: [[at, middle - 3], [at, middle + 3]],
      places: (wide) => everywhere([at + GAP + 2, at - wide - GAP - 2, at - wide / 2], heights),
    };
  }
  const [at, top, bottom] = [x(mark.x), y(Math.max(mark.from, mark.to)), y(Math.min(mark.from, mark.to))];
  /** @type {[number, number][]} */
  const line = [[at, top], [at, bottom]];
  if (mark.type === "span") {
    const middle = (top + bottom) / 2;
    const heights = [0, 20, -20, 40, -40, 60, -60].map((off) => middle + off);
    return {
      shapes: [svg("path", { d: `M${at - 6} ${top}h12M${at} ${top}V${bottom}M${at - 6} ${bottom}h12`, class: "span" })],
      line,
      places: (wide) => [
        ...everywhere([at - wide - GAP - 6, at + GAP + 6], heights),
        ...everywhere([at - wide / 2], [bottom + clear, top - clear]),
      ],
    };
  }
  // a staff: blocks to the left and right of its middle by turns
  const block = Math.max(4, (bottom - top) / 12);
  const blocks = steps(top, bottom - block / 2, block).map((up, i) =>
    svg("rect", { x: at - (i % 2 ? 0 : 5), y: up, width: 5, height: Math.min(block, bottom - up), class: "point" }));
  const outline = svg("rect", { x: at - 5, y: top, width: 10, height: bottom - top, class: "staff" });
  return { shapes: [outline, ...blocks], line, places: () => [] };
}

/** Small areas along a line, for words to keep clear of. @param {readonly (readonly [number, number])[]} points */
function along(points) {
  return points.slice(1).flatMap(([toX, toY], i) => {
    const [fromX, fromY] = points[i] ?? [toX, toY];
    const parts = Math.max(1, Math.ceil(Math.hypot(toX - fromX, toY - fromY) / 6));
    return Array.from({ length: parts + 1 }, (_, part) => {
      const [atX, atY] = [fromX + (toX - fromX) * part / parts, fromY + (toY - fromY) * part / parts];
      return { left: atX - 3, right: atX + 3, top: atY - 3, bottom: atY + 3 };
    });
  });
}

/** Every height at every place. @param {number[]} lefts @param {number[]} middles */
const everywhere = (lefts, middles) =>
  middles.flatMap((middle) => lefts.map((left) => /** @type {[number, number]} */ ([left, middle])));

/** @param {number} from @param {number} to */
function steps(from, to, step = TEXT) {
  const list = [];
  for (let at = from; at < to; at += step) list.push(at);
  return list;
}
