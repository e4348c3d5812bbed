import type { Dimension } from '../quantity/quantity.js';

/** What the units of readings end in, in any case. */
const bases: Readonly<Partial<Record<Dimension, RegExp>>> = {
  voltage: /V$/i,
  current: /A$/i,
  power: /W$/i,
  // U+03A9 is the Greek letter, U+2126 the ohm sign, which looks the same.
  resistance: /(?:ohms?|[\u03a9\u2126])$/i,
  temperature: /(?:°C|DEG ?C|CEL|C)$/i,
};

/** In capitals, as IEEE 488.2 has its suffixes (7.7.3, table 7-2, from memory): `M` is milli, mega is `MA`. */
const inCapitals = prefixes({ '': 0, K: 3, M: -3, U: -6, N: -9, P: -12 });
/** As the SI has them, with a `u` for want of a µ, and a `K`, which can be nothing else. */
const asInSi = prefixes({ '': 0, k: 3, K: 3, m: -3, u: -6, '\u00b5': -6, '\u03bc': -6, n: -9, p: -12 });
/** Only ohms come in millions. */
const ofOhms = prefixes({ M: 6, MA: 6, G: 9 });

/**
 * The power of ten that a unit in a reply stands for. Capitals alone are read as suffixes of IEEE 488.2 are,
 * where `MV` is a millivolt and `MOHM` a megohm; else the prefixes are those of the SI. Undefined where it is
 * no unit of that dimension, or could be two: small letters alone, `mohm` is a milliohm to the one, and a
 * megohm to whoever made them of `MOHM`.
 */
export function placesOf(unit: string, dimension: Dimension): number | undefined {
  const text = asText(unit).trim();
  const base = bases[dimension]?.exec(text);
  if (!base) return undefined;
  const prefix = text.slice(0, base.index).trimEnd();
  if (dimension === 'temperature') return prefix === '' ? 0 : undefined;
  if (dimension === 'resistance') {
    if (prefix === 'm' && text === text.toLowerCase()) return undefined;
    const places = ofOhms.get(prefix);
    if (places !== undefined) return places;
  }
  return (/\p{Ll}/u.test(text) ? asInSi : inCapitals).get(prefix);
}

/** Replies come as bytes, one a character; a µ, a ° or an Ω in UTF-8 is two or three of them. */
function asText(unit: string): string {
  if (!/[\u0080-\u00ff]/.test(unit)) return unit;
  const decoded = Buffer.from(unit, 'latin1').toString('utf8');
  return decoded.includes('\ufffd') ? unit : decoded;
}

function prefixes(places: Readonly<Record<string, number>>): ReadonlyMap<string, number> {
  return new Map(Object.entries(places));
}
