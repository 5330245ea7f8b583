/**
 * A number as instruments and spreadsheets write it: sign, digits, decimal mark, exponent; nothing else. Scanned once from
 * left to right, so that no text of any length is slow. "NaN", hexadecimal, thousands separators and other scripts'
 * digits are not numbers here: they become a bad cell with its line, never a zero.
 * @param decimal - the file's decimal mark.
 * @returns the same double as Number(text) with a point; NaN when the text is not such a number.
 */
export function readNumber(text: string, decimal: '.' | ','): number {
  const end = text.length;
  let at = 0;
  let code = text.charCodeAt(at);
  if (code === 43 || code === 45) at += 1;
  const firstDigit = at;
  while (isDigit(text.charCodeAt(at))) at += 1;
  let digits = at - firstDigit;
  let mark = -1;
  if (at < end && text[at] === decimal) {
    mark = at;
    at += 1;
    const fraction = at;
    while (isDigit(text.charCodeAt(at))) at += 1;
    digits += at - fraction;
  }
  if (digits === 0) return NaN;
  code = text.charCodeAt(at);
  if (code === 101 || code === 69) {
    at += 1;
    code = text.charCodeAt(at);
    if (code === 43 || code === 45) at += 1;
    const exponent = at;
    while (isDigit(text.charCodeAt(at))) at += 1;
    if (at === exponent) return NaN;
  }
  if (at !== end) return NaN;
  const value = Number(
    decimal === ',' && mark >= 0 ? `${text.slice(0, mark)}.${text.slice(mark + 1)}` : text,
  );
  return Number.isFinite(value) ? value : NaN;
}

const isDigit = (code: number) => code >= 48 && code <= 57;
