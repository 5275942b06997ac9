// Reads the entry that an address carries.
import { unitName } from "./form.js";

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
    const field = of.fields.find((each) => each.name === name || unitName(each.name) === name);
    const { kind } = field ?? {};
    const isUnit = field && field.name !== name;
    const list = kind?.type === "number"
      ? quantities.find((each) => each.name === kind.quantity)?.units.map((each) => each.symbol)
      : kind?.type === "choice" ? kind.options.map((each) => each.value) : undefined;
    const fits = field && !(name in known)
      && (isUnit ? kind?.type === "number" && list?.includes(text) : kind?.type !== "choice" || list?.includes(text));
    if (fits) known[name] = text;
    else unknown += `\n${name}=${text}`;
  }
  return { known, unknown: unknown.trim() };
}
