/** Windows-1252 for bytes 0x80 to 0x9F; all others are the same as in Unicode. Source: WHATWG Encoding Standard, index-windows-1252. */
const UPPER_CONTROLS =
  '\u20ac\x81\u201a\u0192\u201e\u2026\u2020\u2021\u02c6\u2030\u0160\u2039\u0152\x8d\u017d\x8f' +
  '\x90\u2018\u2019\u201c\u201d\u2022\u2013\u2014\u02dc\u2122\u0161\u203a\u0153\x9d\u017e\u0178';

/** Own table, because some programs' decoder of that name is really ISO 8859-1, and a reading must be the same everywhere. */
export function decodeWindows1252(bytes: Uint8Array): string {
  let text = '';
  for (let start = 0; start < bytes.length; start += 8192) {
    let part = String.fromCharCode(...bytes.subarray(start, start + 8192));
    for (let code = 0x80; code < 0xa0; code++) {
      const from = String.fromCharCode(code);
      if (part.includes(from)) part = part.replaceAll(from, UPPER_CONTROLS[code - 0x80]!);
    }
    text += part;
  }
  return text;
}

/**
 * Where bytes stop being UTF-8, so that a person can look there.
 * @returns index of the first byte that does not fit (Unicode Standard, table 3-7), or -1 when all do.
 */
export function firstNonUtf8(bytes: Uint8Array): number {
  for (let at = 0; at < bytes.length;) {
    const lead = bytes[at]!;
    if (lead < 0x80) {
      at += 1;
      continue;
    }
    const length =
      lead >= 0xc2 && lead <= 0xdf
        ? 2
        : lead >= 0xe0 && lead <= 0xef
          ? 3
          : lead >= 0xf0 && lead <= 0xf4
            ? 4
            : 0;
    if (length === 0) return at;
    const second = bytes[at + 1] ?? 0;
    const least = lead === 0xe0 ? 0xa0 : lead === 0xf0 ? 0x90 : 0x80;
    const most = lead === 0xed ? 0x9f : lead === 0xf4 ? 0x8f : 0xbf;
    if (second < least || second > most) return at;
    for (let more = 2; more < length; more++) if (((bytes[at + more] ?? 0) & 0xc0) !== 0x80) return at;
    at += length;
  }
  return -1;
}

/** Line (from 1) in which a byte stands. */
export function lineOfByte(bytes: Uint8Array, place: number): number {
  let line = 1;
  for (let at = 0; at < place; at++) {
    if (bytes[at] === 10 || (bytes[at] === 13 && bytes[at + 1] !== 10)) line += 1;
  }
  return line;
}
