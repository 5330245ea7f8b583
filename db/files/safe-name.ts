/**
 * A file's name as it is shown and offered for download: normal form C, without control, bidirectional or separator
 * characters, at most 200 characters. It is data only: files are stored under ids.
 */
export function safeName(given: string): string {
  let out = '';
  for (const letter of given.normalize('NFC')) {
    const code = letter.codePointAt(0)!;
    const control = code < 32 || (code >= 127 && code < 160);
    const direction =
      (code >= 0x200b && code <= 0x200f) ||
      (code >= 0x2028 && code <= 0x202e) ||
      (code >= 0x2066 && code <= 0x2069);
    if (!control && !direction && letter !== '/' && letter !== '\\' && code !== 0xfeff) out += letter;
  }
  const short = [...out.trim()].slice(0, 200).join('');
  return short === '' || short === '.' || short === '..' ? 'file' : short;
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
