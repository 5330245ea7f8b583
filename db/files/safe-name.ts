const LONGEST_NAME = 200;
/** What follows the last point is an ending when it is this short, point included. */
const LONGEST_ENDING = 12;

/**
 * A file's name as it is shown and offered for download: normal form C, without control, bidirectional or separator
 * characters, at most 200 characters, its ending kept. It is data only: files are stored under ids.
 */
export function safeName(given: string): string {
  let out = '';
  for (const letter of given.toWellFormed().normalize('NFC')) {
    const code = letter.codePointAt(0)!;
    const control = code < 32 || (code >= 127 && code < 160);
    // Marks of direction: Unicode Standard Annex 9, section 2 (from memory); line ends and invisible letters with them.
    const direction =
      code === 0x061c ||
      (code >= 0x200b && code <= 0x200f) ||
      (code >= 0x2028 && code <= 0x202e) ||
      (code >= 0x2066 && code <= 0x2069);
    if (!control && !direction && letter !== '/' && letter !== '\\' && code !== 0xfeff) out += letter;
  }
  const short = shorten([...out.trim()]).join('');
  return short === '' || short === '.' || short === '..' ? 'file' : short;
}

function shorten(letters: readonly string[]): readonly string[] {
  if (letters.length <= LONGEST_NAME) return letters;
  const point = letters.lastIndexOf('.');
  const ending = point >= 0 && letters.length - point <= LONGEST_ENDING ? letters.slice(point) : [];
  return [...letters.slice(0, LONGEST_NAME - ending.length), ...ending];
}

/** Content-Disposition for a download, RFC 6266 with the extended form of RFC 8187 for other than plain letters. */
export function attachmentDisposition(name: string): string {
  const plain = name.replace(/[^\x20-\x7e]|["\\%]/g, '_');
  const encoded = encodeURIComponent(name).replace(
    /['()*]/g,
    (letter) => `%${letter.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}
