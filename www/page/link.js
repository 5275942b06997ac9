// Reads the entry that an address carries.
import { infoOf, namesIn, unitsOf } from "./field.js";

export const LINK_AT_MOST = 8192; // characters that are read

/**
 * The entry in a link, and what in it this page does not know. A link is anyone's text: nothing in it is trusted.
 * @param {import("./core.js").Question} of @param {readonly import("./core.js").QuantityInfo[]} quantities
 * @param {string} link what stands behind the question mark
 */
export function readLink(of, quantities, link) {
  /** @type {Record<string, string>} */
  const known = {};
  let unknown = link.slice(LINK_AT_MOST);
  for (const [name, text] of new URLSearchParams(link.slice(0, LINK_AT_MOST))) {
    const field = of.fields.find((each) => namesIn(each).includes(name));
    const unitOf = field && unitsOf(field).find(([unit]) => unit === name)?.[1];
    const list = unitOf ? infoOf(quantities, unitOf)?.units.map((each) => each.symbol) ?? []
      : field?.kind.type === "choice" ? field.kind.options.map((each) => each.value) : undefined;
    const fits = field && !(name in known) && (!list || list.includes(text));
    if (fits) known[name] = text;
    else unknown += `\n${name}=${text}`;
  }
  return { known, unknown: unknown.trim() };
}
