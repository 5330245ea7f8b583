import Papa from 'papaparse';

/**
 * Text that a spreadsheet would take for a formula gets an apostrophe in front; numbers stay numbers.
 * Source: OWASP, "CSV Injection" (from memory); RFC 4180 for the quoting, which papaparse does.
 */
export function toSafeCsv(
  header: readonly string[],
  rows: readonly (readonly (string | number)[])[],
): string {
  const safe = (cell: string | number) => (typeof cell === 'string' && isRisky(cell) ? `'${cell}` : cell);
  return `${Papa.unparse([header.map(safe), ...rows.map((row) => row.map(safe))], { newline: '\r\n' })}\r\n`;
}

function isRisky(text: string): boolean {
  const first = text.trimStart()[0] ?? '';
  return '=+-@＝＋－＠\t\r\0'.includes(first) && first !== ''
    ? true
    : text.startsWith('\t') || text.startsWith('\r');
}
