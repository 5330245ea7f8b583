/**
 * A number as instruments and spreadsheets write it: sign, digits, decimal mark, exponent; nothing else. Scanned once from
 * left to right, so that no text of any length is slow. "NaN", hexadecimal, thousands separators and other scripts'
 * digits are not numbers here: they become a bad cell with its line, never a zero.
 * @param decimal - the file's decimal mark.
 * @returns the same double as Number(text) with a point; NaN when the text is not such a number, or too large for a double.
 */
export function readNumber(text: string, decimal: '.' | ','): number {
  const mark = decimal === '.' ? 46 : 44;
  let at = 0;
  let code = text.charCodeAt(at);
  if (code === 43 || code === 45) at += 1;
  const firstDigit = at;
  while (isDigit(text.charCodeAt(at))) at += 1;
  let digits = at - firstDigit;
  let markAt = -1;
  if (text.charCodeAt(at) === mark) {
    markAt = at;
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
  if (at !== text.length) return NaN;
  const plain = decimal === ',' && markAt >= 0 ? `${text.slice(0, markAt)}.${text.slice(markAt + 1)}` : text;
  const value = Number(plain);
  return Number.isFinite(value) ? value : NaN;
}

const isDigit = (code: number) => code >= 48 && code <= 57;

const MISSING = new Set([
  'nan',
  'na',
  'n/a',
  '#n/a',
  'null',
  'none',
  '-',
  '--',
  'inf',
  '+inf',
  '-inf',
  'infinity',
  '+infinity',
  '-infinity',
]);
const SHOWN = 30;

/** An empty cell, or one that says in words that there is no value, such as "NaN" or "n/a". */
export const saysNoValue = (text: string): boolean => text === '' || MISSING.has(text.toLowerCase());

/**
 * Why a cell that `readNumber` refused is no number, for the list of rows that could not be used.
 * @param what - name of the part the cell plays, such as "x" or "time".
 */
export function whyNoNumber(what: string, text: string, decimal: '.' | ','): string {
  if (text === '') return `${what} is missing`;
  const shown = `${what} "${text.length > SHOWN ? `${text.slice(0, SHOWN)}…` : text}"`;
  if (saysNoValue(text)) return `${shown} says that there is no value`;
  // A number after all, so it was its value in the unit wanted that does not fit into a double.
  if (!Number.isNaN(readNumber(text, decimal))) return `${shown} is too large`;
  const other = decimal === '.' ? ',' : '.';
  const otherMark = text.indexOf(other);
  if (otherMark >= 0 && !Number.isNaN(readNumber(text, other))) {
    return `${shown} has a ${other === ',' ? 'comma' : 'point'}, but the decimal mark here is the ${other === ',' ? 'point' : 'comma'}`;
  }
  if (isGrouped(text, decimal)) return `${shown} has a separator between its digits`;
  const bare = text.startsWith('-') || text.startsWith('+') ? text.slice(1) : text;
  if (bare.startsWith('0x') || bare.startsWith('0X')) return `${shown} is hexadecimal`;
  const letters = decimal === ',' ? text.replace(',', '.') : text;
  if (letters !== '' && Math.abs(Number(letters)) === Infinity) return `${shown} is too large`;
  if (text.includes('\u2212')) return `${shown} has a minus sign that is not "-"`;
  return `${shown} is not a number`;
}

/** Digits with blanks, apostrophes, underscores, commas or points among them: thousands separators. */
function isGrouped(text: string, decimal: '.' | ','): boolean {
  let bare = '';
  let separators = 0;
  for (const letter of text) {
    const separates =
      letter === ' ' ||
      letter === "'" ||
      letter === '_' ||
      letter === '\u2019' ||
      letter === '\u00a0' ||
      letter === '\u202f';
    if (separates || ((letter === ',' || letter === '.') && letter !== decimal)) separators += 1;
    else bare += letter;
  }
  return separators > 0 && !Number.isNaN(readNumber(bare, decimal));
}
