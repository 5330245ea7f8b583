import { readFileSync } from 'node:fs';
import path from 'node:path';

const GOLDEN = path.resolve(import.meta.dirname, '../fixtures/golden');

/** A file to drop, with the name that the person sees. */
export interface DroppedFile {
  name: string;
  mimeType: string;
  buffer: Buffer;
}

/** One of the golden files (known truth in tests/fixtures/golden/golden.json). */
export function goldenFile(name: string): DroppedFile {
  return { name, mimeType: 'text/csv', buffer: readFileSync(path.join(GOLDEN, name)) };
}

/** The same positions as a semicolon-separated file with decimal commas, as spreadsheets in many countries write it. */
export function withDecimalCommas(file: DroppedFile, name: string): DroppedFile {
  const text = file.buffer.toString('utf8').replaceAll(',', ';').replaceAll('.', ',');
  return { ...file, name, buffer: Buffer.from(text, 'utf8') };
}

/** The first eight bytes of any PNG picture (PNG specification, W3C, section 5.2) and some noise: no trajectory at all. */
export function pictureNamedCsv(): DroppedFile {
  const signature = [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a];
  return {
    name: 'beads.csv',
    mimeType: 'text/csv',
    buffer: Buffer.from([...signature, ...Array.from({ length: 400 }, (_, i) => (i * 37) % 256)]),
  };
}
