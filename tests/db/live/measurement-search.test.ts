import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import {
  MEASUREMENT_SORTS,
  measurementPage,
  NO_FILTERS,
  RANGE_MODES,
  VERDICTS,
  type MeasurementFilters,
  type MeasurementRow,
} from '../../../db/inputs/measurement';
import { listMeasurements } from '../../../db/queries/measurement/list-measurements';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { byLooking, makeWorld, type Reader, type World } from './measurement-world';

/** The search against the same question answered by looking at every row (brute force; no outside source needed). */
const SEED = 20260302;
let database: TestDatabase;
let world: World;

beforeAll(async () => {
  database = await createTestDatabase();
  world = await makeWorld(database, SEED);
});
afterAll(() => database.drop());

const firstPage = (reader: Reader, filters: MeasurementFilters, limit = 100) =>
  listMeasurements(database.app, reader.actor, { ...filters, after: null, limit });

/** Follows the list to its end, `limit` rows at a time. */
async function everyRow(
  reader: Reader,
  filters: MeasurementFilters,
  limit: number,
): Promise<MeasurementRow[]> {
  const rows: MeasurementRow[] = [];
  let after: string | null = null;
  do {
    const page = await listMeasurements(database.app, reader.actor, { ...filters, after, limit });
    expect(page.rows.length === limit || page.next === null).toBe(true);
    expect(page.summary === null).toBe(after !== null);
    rows.push(...page.rows);
    after = page.next;
  } while (after !== null && rows.length <= world.rows.length);
  return rows;
}

const ids = (rows: readonly { blockId: string }[]) => rows.map((row) => row.blockId);

const reversed = <T extends number | string>(a: T | null, b: T | null) => a !== null && b !== null && b < a;
const bound = fc.option(fc.constantFrom(0, 1e-9, 0.05, 0.099, 0.1, 0.3, 0.43, 0.5, 1, 3, 2300, 1e6));
const day = fc.option(fc.constantFrom('1900-01-01', '2026-01-05', '2026-03-02', '2026-03-03', '2026-12-31'));
const question = fc
  .record({
    dFrom: bound,
    dTo: bound,
    range: fc.constantFrom(...RANGE_MODES),
    verdict: fc.subarray([...VERDICTS]),
    // Indexes of notebooks; 6 is one that does not exist.
    notebook: fc.subarray([0, 1, 2, 3, 4, 5, 6]),
    dateFrom: day,
    dateTo: day,
    sort: fc.constantFrom(...MEASUREMENT_SORTS),
  })
  .filter(({ dFrom, dTo, dateFrom, dateTo }) => !reversed(dFrom, dTo) && !reversed(dateFrom, dateTo));
const named = (given: { notebook: number[] }) => ({
  notebook: given.notebook.map((i) => world.notebooks[i] ?? '0b0e6a3e-5b1d-4c7a-9f6e-2d1c0b9a8f7e'),
});
const who = fc.constantFrom('owner', 'reader', 'witness', 'guest', 'outsider', 'admin' as const);

describe('a search for measurements', () => {
  test('the random rows hold what makes searching hard', () => {
    const done = world.rows.filter((row) => row.status === 'done');
    expect(done.length).toBeGreaterThan(80);
    expect(done.filter((row) => row.d === null).length).toBeGreaterThan(15);
    expect(done.filter((row) => row.d === 0.43).length).toBeGreaterThan(5);
    expect(
      done.filter((row) => row.d !== null && (row.lo === null || row.hi === null)).length,
    ).toBeGreaterThan(5);
    expect(done.length).toBeLessThan(world.rows.length);
  });

  test('gives what looking at every row gives, in the same order, with its counts', async () => {
    await fc.assert(
      fc.asyncProperty(question, who, async (given, name) => {
        const reader = world.actors[name];
        const filters = { ...given, ...named(given) };
        const expected = byLooking(world, reader, filters);
        const page = await firstPage(reader, filters);
        expect(measurementPage.safeParse(page).error).toBeUndefined();
        expect(ids(page.rows)).toEqual(ids(expected.slice(0, 100)));
        expect(page.summary?.total).toEqual({ count: expected.length, more: false });

        const noRange = { ...filters, dFrom: null, dTo: null };
        const hasRange = filters.dFrom !== null || filters.dTo !== null;
        const lacking = byLooking(world, reader, noRange).filter((row) => row.d === null).length;
        expect(page.summary?.withoutD).toEqual(hasRange ? { count: lacking, more: false } : null);

        const ends = expected
          .flatMap((row) => [row.d, row.lo, row.hi])
          .filter((end) => end !== null && end > 0) as number[];
        const tops = expected
          .flatMap((row) => [row.d, row.hi])
          .filter((end) => end !== null && end > 0) as number[];
        const extent = tops.length === 0 ? null : { lo: Math.min(...ends), hi: Math.max(...tops) };
        expect(page.summary?.extent).toEqual(extent);
      }),
      { numRuns: 300, seed: SEED },
    );
  });

  test('says, when nothing matches, what each restriction costs', async () => {
    await fc.assert(
      fc.asyncProperty(question, who, async (given, name) => {
        const reader = world.actors[name];
        const filters = { ...given, ...named(given) };
        const total = (widened: Partial<MeasurementFilters>) => ({
          count: byLooking(world, reader, { ...filters, ...widened }).length,
          more: false,
        });
        const expected = [
          filters.dFrom !== null || filters.dTo !== null
            ? { what: 'range', ...total({ dFrom: null, dTo: null }) }
            : null,
          filters.verdict.length > 0 ? { what: 'verdict', ...total({ verdict: [] }) } : null,
          filters.notebook.length > 0 ? { what: 'notebook', ...total({ notebook: [] }) } : null,
          filters.dateFrom !== null || filters.dateTo !== null
            ? { what: 'date', ...total({ dateFrom: null, dateTo: null }) }
            : null,
        ].filter((widened) => widened !== null);
        const { summary } = await firstPage(reader, filters);
        expect(summary?.without).toEqual(summary?.total.count === 0 ? expected : []);
      }),
      { numRuns: 150, seed: SEED + 1 },
    );
  });

  test('pages through every match once and in order, whatever the size of a page', async () => {
    await fc.assert(
      fc.asyncProperty(question, who, fc.integer({ min: 1, max: 17 }), async (given, name, limit) => {
        const filters = { ...given, ...named(given) };
        const reader = world.actors[name];
        expect(ids(await everyRow(reader, filters, limit))).toEqual(ids(byLooking(world, reader, filters)));
      }),
      { numRuns: 60, seed: SEED + 2 },
    );
  });

  test.each(MEASUREMENT_SORTS)('pages one by one over ties and missing D, sorted %s', async (sort) => {
    const filters = { ...NO_FILTERS, sort };
    const expected = byLooking(world, world.actors.owner, filters);
    expect(ids(await everyRow(world.actors.owner, filters, 1))).toEqual(ids(expected));
  });

  test('shows a row as it stands in the record', async () => {
    const { rows } = await firstPage(world.actors.owner, NO_FILTERS);
    for (const row of rows) {
      const known = world.rows.find((one) => one.blockId === row.blockId);
      expect(row).toMatchObject({
        entryId: known?.entryId,
        notebookId: known?.notebookId,
        number: known?.number,
        experimentDate: known?.date,
        position: known?.position,
        verdict: known?.verdict,
        d: known?.d === null ? null : { value: known?.d, lo: known?.lo, hi: known?.hi },
        tracks: (known?.position ?? 0) * 11,
        people: [world.actors.owner.actor.name],
        state: 'draft',
      });
    }
  });

  test('a D measured while one pages neither repeats nor hides another', async () => {
    const reader = world.actors.owner;
    const filters: MeasurementFilters = { ...NO_FILTERS, sort: 'd-asc' };
    const before = byLooking(world, reader, filters);
    const first = await firstPage(reader, filters, 10);
    const moved = before[3];
    if (!moved) throw new Error('the world is too small');
    const update = (d: number) =>
      database.app.$client.query('UPDATE block_result SET d = $1 WHERE block_id = $2', [d, moved.blockId]);
    await update(0);
    try {
      const second = await listMeasurements(database.app, reader.actor, {
        ...filters,
        after: first.next,
        limit: 100,
      });
      expect(ids(second.rows)).toEqual(ids(before.slice(10, 110)));
    } finally {
      await update(moved.d as number);
    }
  });
});
