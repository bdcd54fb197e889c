/**
 * A fingerprint of a walk, so that a checkpoint is not continued with another walk. It tells
 * walks apart by accident, not against intent: FNV-1a is no cryptographic hash.
 */

/** JSON without spaces and with the keys of every object sorted: equal documents, equal text. */
export function canonicalText(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonicalText).join(",")}]`;
  if (typeof value !== "object" || value === null) return JSON.stringify(value);
  const entries = Object.entries(value).sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0));
  return `{${entries.map(([key, item]) => `${JSON.stringify(key)}:${canonicalText(item)}`).join(",")}}`;
}

/**
 * FNV-1a, 64 bits (Fowler, Noll, Vo), of the UTF-8 bytes, as 16 hexadecimal digits. The
 * 64-bit product by 2^40 + 0x1b3 is made of 16-bit pieces, which doubles hold exactly.
 */
export function fnv1a64(text: string): string {
  let [a, b, c, d] = [0x2325, 0x8422, 0x9ce4, 0xcbf2];
  for (const byte of new TextEncoder().encode(text)) {
    a ^= byte;
    const low = a * 0x1b3;
    const second = b * 0x1b3 + (low >>> 16);
    const third = c * 0x1b3 + ((a << 8) >>> 0) + (second >>> 16);
    const fourth = d * 0x1b3 + b * 0x100 + Math.floor(third / 0x10000);
    [a, b, c, d] = [low & 0xffff, second & 0xffff, third & 0xffff, fourth & 0xffff];
  }
  return [d, c, b, a].map((part) => part.toString(16).padStart(4, "0")).join("");
}

/** The fingerprint of a walk's document (as written: "1/2" and "0.5" differ). */
export function walkHash(walk: { readonly document: unknown }): string {
  return fnv1a64(canonicalText(walk.document));
}
