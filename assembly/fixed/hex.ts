/** Limbs from the text that an engine writes a big integer as. */

function digit(code: u32): u64 {
  return code < 58 ? code - 48 : code - 87;
}

/** `limbs` 64-bit limbs, least significant first, from `count` hexadecimal digits in lower case, ASCII. */
export function limbsFromHex(into: usize, limbs: u32, text: usize, count: u32): void {
  let end = text + count;
  for (let i: u32 = 0; i < limbs; i++, into += 8) {
    const start = end > text + 16 ? end - 16 : text;
    let x: u64 = 0;
    for (let at = start; at < end; at++) x = (x << 4) | digit(load<u8>(at));
    store<u64>(into, x);
    end = start;
  }
}
