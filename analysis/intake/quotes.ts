import { MAX_FIELD_CHARACTERS } from './limits';

/** A line whose quotation marks do not add up. */
export interface QuoteFault {
  readonly line: number;
  readonly reason: string;
  readonly text: string;
}

/**
 * Finds lines with quotation marks that RFC 4180 (section 2) does not allow, and takes them out, so that one stray mark costs
 * one line and never swallows the rest of a file. A mark that opens a cell is the cell's first character; inside, two marks
 * mean one; the closing one is followed by blanks at most, then the delimiter or the line's end. The search for it is bounded
 * and every step goes forward, so no text makes this slow.
 * @param text - line breaks are \n.
 * @returns the text with faulty lines left empty (no line moves), and the faults in order.
 */
export function takeOutQuoteFaults(text: string, delimiter: string): { text: string; faults: QuoteFault[] } {
  const faults: QuoteFault[] = [];
  const kept: string[] = [];
  let keptUpTo = 0;
  const place = new LinePlace(text);
  // A record may go over several lines; a fault in any of them spoils all, because its cells hang together.
  let record = { start: 0, line: 1, lastLine: 0 };
  let at = text.indexOf('"');
  while (at >= 0) {
    const opens = at === 0 || text[at - 1] === '\n' || text[at - 1] === delimiter;
    if (!opens) {
      at = text.indexOf('"', at + 1);
      continue;
    }
    place.moveTo(at);
    if (record.lastLine !== place.line)
      record = { start: place.start, line: place.line, lastLine: place.line };
    const close = closingMark(text, at, delimiter);
    if (close.fault === null) {
      place.moveTo(close.at);
      record = { ...record, lastLine: place.line };
      at = text.indexOf('"', close.at + 1);
      continue;
    }
    const end = place.end;
    const lines = text.slice(record.start, end).split('\n');
    for (const [i, one] of lines.entries()) {
      const reason = i === 0 ? close.fault : `belongs to the cell that begins in line ${record.line}`;
      faults.push({ line: record.line + i, reason, text: one });
    }
    kept.push(text.slice(keptUpTo, record.start), '\n'.repeat(lines.length - 1));
    keptUpTo = end;
    at = text.indexOf('"', end);
  }
  if (faults.length === 0) return { text, faults };
  kept.push(text.slice(keptUpTo));
  return { text: kept.join(''), faults };
}

/** The line around a place that only moves forward. */
class LinePlace {
  line = 1;
  start = 0;
  end: number;

  constructor(private readonly text: string) {
    this.end = this.endFrom(0);
  }

  moveTo(at: number): void {
    while (this.end < at) {
      this.line += 1;
      this.start = this.end + 1;
      this.end = this.endFrom(this.start);
    }
  }

  private endFrom(start: number): number {
    const end = this.text.indexOf('\n', start);
    return end < 0 ? this.text.length : end;
  }
}

function closingMark(text: string, open: number, delimiter: string): { fault: string | null; at: number } {
  for (let at = text.indexOf('"', open + 1); at >= 0; at = text.indexOf('"', at + 1)) {
    if (at - open > MAX_FIELD_CHARACTERS) break;
    if (text[at + 1] === '"') {
      at += 1;
      continue;
    }
    let next = at + 1;
    while (text[next] !== delimiter && (text[next] === ' ' || text[next] === '\t')) next += 1;
    const ends = next >= text.length || text[next] === delimiter || text[next] === '\n';
    return ends
      ? { fault: null, at }
      : { fault: 'text stands after the closing quotation mark of a cell', at };
  }
  return { fault: 'a quotation mark is opened and not closed', at: open };
}
