import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { ENGINE_VERSION } from '../../analysis/analyse';

/** The measured table that people are shown: of this engine, and good enough to be shown. Remade by npm run bench:accuracy. */
interface Cell {
  motion: string;
  tracks: number;
  frames: number;
  x: number;
  repeats: number;
  right: number;
  wrong: number;
  free: number;
  heldD: number | null;
  heldOther: number | null;
}
const table = JSON.parse(readFileSync(new URL('../../analysis/accuracy.json', import.meta.url), 'utf8')) as {
  engine: string;
  cells: Cell[];
};
const free = table.cells.filter((cell) => cell.motion === 'free');

test('was measured with this engine', () => {
  expect(table.engine).toBe(ENGINE_VERSION);
});

describe('free diffusion', () => {
  test.each(free)('$tracks tracks of $frames frames, x = $x: something else in at most 5 %', (cell) => {
    // Four standard errors of a count.
    expect(cell.wrong / 100).toBeLessThan(0.05 + 4 * Math.sqrt((0.05 * 0.95) / cell.repeats));
  });

  test('over all cells the alarms are at most 5 %, and intervals of D hold the truth in 93 to 97 %', () => {
    const weighted = (of: (cell: Cell) => number) =>
      free.reduce((sum, cell) => sum + of(cell) * cell.repeats, 0) /
      free.reduce((sum, cell) => sum + cell.repeats, 0);
    const repeats = free.reduce((sum, cell) => sum + cell.repeats, 0);
    expect(weighted((cell) => cell.wrong)).toBeLessThan(5 + 200 * Math.sqrt((0.05 * 0.95) / repeats));
    // Of the data sets that were called free.
    const held = weighted((cell) => cell.heldD ?? 95);
    expect(held).toBeGreaterThan(93);
    expect(held).toBeLessThan(97.5);
  });
});

test('with 20 tracks of 100 frames or more, what departs is recognised', () => {
  const large = table.cells.filter(
    (cell) =>
      cell.tracks >= 20 && cell.frames >= 100 && /^(flow 0.3|own|trap 0.1|box 6|power)/.test(cell.motion),
  );
  expect(large.length).toBeGreaterThan(30);
  for (const cell of large) expect(cell.right, JSON.stringify(cell)).toBeGreaterThan(80);
});
