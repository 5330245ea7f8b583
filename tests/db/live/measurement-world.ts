import { randomUUID } from 'node:crypto';
import { sql } from 'drizzle-orm';
import { seededRandom } from '../../../analysis/random';
import { VERDICTS, type MeasurementFilters, type MeasurementRow } from '../../../db/inputs/measurement';
import type { Actor } from '../../../db/policies/may';
import { blockResult, result } from '../../../db/schema/index';
import type { TestDatabase } from '../../helpers/database';
import { makeEntry, makeNotebook, makePerson } from '../../helpers/factories';

/** A row of block_result with its entry's sort keys, as the brute-force answer knows it. */
export interface Known {
  readonly notebookId: string;
  readonly entryId: string;
  readonly date: string;
  readonly number: number;
  readonly blockId: string;
  readonly position: number;
  readonly status: 'empty' | 'waiting' | 'done' | 'failed';
  readonly verdict: MeasurementRow['verdict'] | null;
  readonly d: number | null;
  readonly lo: number | null;
  readonly hi: number | null;
}

export interface World {
  readonly rows: readonly Known[];
  readonly notebooks: readonly string[];
  /** Each actor with the notebooks that they belong to. */
  readonly actors: Readonly<Record<'owner' | 'reader' | 'witness' | 'guest' | 'outsider' | 'admin', Reader>>;
}
export interface Reader {
  readonly actor: Actor;
  readonly may: ReadonlySet<string>;
}

const VALUES = [0, 0.05, 0.1, 0.1, 0.25, 0.43, 0.43, 0.43, 1, 1.7, 2e-9, 2300];
const DAYS = ['2025-11-30', '2026-01-05', '2026-03-02', '2026-03-02', '2026-03-03', '2026-07-19'];

/** Six notebooks, 60 entries and their blocks, with many equal dates and D, missing D and intervals with open ends. */
export async function makeWorld(database: TestDatabase, seed: number): Promise<World> {
  const random = seededRandom(seed);
  const pick = <T>(list: readonly T[]): T => list[random.whole(list.length)] as T;
  const db = database.app;
  const [owner, reader, witness, guest, outsider, admin] = [
    await makePerson(db, { role: 'pi' }),
    await makePerson(db),
    await makePerson(db),
    await makePerson(db, { role: 'guest' }),
    await makePerson(db),
    await makePerson(db, { admin: true }),
  ];
  const notebooks: string[] = [];
  for (let i = 0; i < 6; i += 1) {
    const members: [Actor, 'reader' | 'witness'][] = [];
    if (i < 3) members.push([reader, 'reader']);
    if (i === 2 || i === 4) members.push([witness, 'witness']);
    if (i === 3) members.push([guest, 'reader']);
    notebooks.push((await makeNotebook(db, owner, { members })).id);
  }
  const rows: Known[] = [];
  for (let i = 0; i < 60; i += 1) {
    const notebookId = notebooks[i % 6] as string;
    const date = pick(DAYS);
    const entryId = await makeEntry(db, notebookId, owner, { experimentDate: date });
    const blocks = random.whole(5);
    for (let position = 1; position <= blocks; position += 1) {
      const status = random.uniform() < 0.85 ? 'done' : pick(['empty', 'waiting', 'failed'] as const);
      // A row that is not done may still hold numbers; they are no measurement.
      const verdict = status === 'done' || random.uniform() < 0.5 ? pick(VERDICTS) : null;
      const d = verdict === null || verdict === 'anomalous' || random.uniform() < 0.1 ? null : pick(VALUES);
      const half = d === null ? 0 : pick([0, 0.02, 0.3, 5]) * d;
      rows.push({
        ...{
          notebookId,
          entryId,
          date,
          number: Math.floor(i / 6) + 1,
          blockId: randomUUID(),
          position,
          status,
          verdict,
          d,
        },
        lo: d === null || random.uniform() < 0.1 ? null : Math.max(0, d - half),
        hi: d === null || random.uniform() < 0.1 ? null : d + half,
      });
    }
  }
  await insertRows(database, rows);
  const all = new Set(notebooks);
  const some = (...which: number[]) => new Set(which.map((i) => notebooks[i] as string));
  return {
    rows,
    notebooks,
    actors: {
      owner: { actor: owner, may: all },
      reader: { actor: reader, may: some(0, 1, 2) },
      witness: { actor: witness, may: some(2, 4) },
      guest: { actor: guest, may: some(3) },
      outsider: { actor: outsider, may: some() },
      admin: { actor: admin, may: some() },
    },
  };
}

async function insertRows(database: TestDatabase, rows: readonly Known[]): Promise<void> {
  for (const row of rows) {
    const address = row.status === 'done' ? row.blockId : null;
    if (address !== null) {
      const outcome = sql`${JSON.stringify({ tracks: row.position * 11 })}::jsonb`;
      await database.app.insert(result).values({ address, engine: 'test/1', outcome, milliseconds: 1 });
    }
    await database.app.insert(blockResult).values({
      ...{ entryId: row.entryId, notebookId: row.notebookId, blockId: row.blockId, position: row.position },
      ...{ status: row.status, verdict: row.verdict, d: row.d, dLo: row.lo, dHi: row.hi, address },
      readingIds: [],
      settings: sql`'{}'::jsonb`,
    });
  }
}

/** The answer by looking at every row: what `reader` may see, filtered and sorted by the plain meaning of the words. */
export function byLooking(world: World, reader: Reader, filters: MeasurementFilters): Known[] {
  return world.rows
    .filter((row) => reader.may.has(row.notebookId) && meets(row, filters))
    .sort(order(filters.sort));
}

export function meets(row: Known, filters: MeasurementFilters): boolean {
  const { dFrom, dTo, dateFrom, dateTo } = filters;
  if (row.status !== 'done') return false;
  if (filters.verdict.length > 0 && !filters.verdict.some((verdict) => verdict === row.verdict)) return false;
  if (filters.notebook.length > 0 && !filters.notebook.includes(row.notebookId)) return false;
  if (dateFrom !== null && row.date < dateFrom) return false;
  if (dateTo !== null && row.date > dateTo) return false;
  if (dFrom === null && dTo === null) return true;
  if (row.d === null) return false;
  const inside = filters.range === 'inside';
  const lowest = inside ? row.d : (row.lo ?? -Infinity);
  const highest = inside ? row.d : (row.hi ?? Infinity);
  return highest >= (dFrom ?? -Infinity) && lowest <= (dTo ?? Infinity);
}

function order(sort: MeasurementFilters['sort']): (a: Known, b: Known) => number {
  const chain = (...steps: number[]) => steps.find((step) => step !== 0) ?? 0;
  const words = (a: string, b: string) => (a < b ? -1 : a > b ? 1 : 0);
  const byDate = (a: Known, b: Known) =>
    chain(
      words(a.date, b.date),
      a.number - b.number,
      words(a.entryId, b.entryId),
      a.position - b.position,
      words(a.blockId, b.blockId),
    );
  if (sort === 'date-asc') return byDate;
  if (sort === 'date-desc') return (a, b) => byDate(b, a);
  const up = sort === 'd-asc' ? 1 : -1;
  return (a, b) => {
    if (a.d === null || b.d === null) return a.d === b.d ? byDate(b, a) : a.d === null ? 1 : -1;
    return up * chain(a.d - b.d, words(a.entryId, b.entryId), words(a.blockId, b.blockId));
  };
}
