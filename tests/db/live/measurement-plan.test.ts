import { sql, type SQL } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { NO_FILTERS, type MeasurementFilters } from '../../../db/inputs/measurement';
import type { Actor } from '../../../db/policies/may';
import { pageStatement } from '../../../db/queries/measurement/find-page';
import { countStatement } from '../../../db/queries/measurement/summarise';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { makeNotebook, makePerson } from '../../helpers/factories';

/** How PostgreSQL answers with 50,000 results in 20 notebooks: from the index, whatever the speed of the machine. */
const NOTEBOOKS = 20;
const ENTRIES_PER_NOTEBOOK = 250;
const BLOCKS_PER_ENTRY = 10;
let database: TestDatabase;
let reader: Actor;
let somewhere: string;

beforeAll(async () => {
  database = await createTestDatabase();
  const owner = await makePerson(database.app);
  reader = await makePerson(database.app);
  for (let i = 0; i < NOTEBOOKS; i += 1) {
    const { id } = await makeNotebook(database.app, owner, { members: i < 5 ? [[reader, 'reader']] : [] });
    if (i === 0) somewhere = id;
  }
  const { app, owner: admin } = database;
  await app.execute(sql`
    insert into entry (id, notebook_id, number, title, experiment_date, created_by)
    select gen_random_uuid(), n.id, k, 'A day', date '2024-01-01' + (k * 3 + 7 * ascii(n.code)) % 900, n.created_by
    from notebook n cross join generate_series(1, ${ENTRIES_PER_NOTEBOOK}::int) k`);
  // D spread evenly over five decades, intervals of a few per cent: a value is a whole number turned by a golden ratio.
  await app.execute(sql`
    insert into block_result (entry_id, notebook_id, block_id, position, reading_ids, settings, status, verdict, d, d_lo, d_hi)
    select e.id, e.notebook_id, gen_random_uuid()::text, k, '{}', '{}', 'done', v.verdict, v.d, v.d * 0.97, v.d * 1.03
    from entry e cross join generate_series(1, ${BLOCKS_PER_ENTRY}::int) k cross join lateral (
      select (enum_range(null::verdict))[1 + (e.number + k) % 5] as verdict,
        case when (e.number + k) % 5 = 3 then null
          else 10 ^ (5 * ((e.number * 31 + k * 7 + ascii(e.notebook_id::text)) * 0.6180339887 % 1)::float8 - 3) end as d) v`);
  await admin.execute(sql`analyze`);
});
afterAll(() => database.drop());

interface Node {
  readonly 'Node Type': string;
  readonly 'Relation Name'?: string;
  readonly 'Index Name'?: string;
  readonly Plans?: readonly Node[];
}
const flat = (node: Node): Node[] => [node, ...(node.Plans ?? []).flatMap(flat)];

async function planOf(statement: SQL): Promise<Node[]> {
  const { rows } = await database.app.execute<{ 'QUERY PLAN': [{ Plan: Node }] }>(
    sql`explain (format json) ${statement}`,
  );
  const plan = rows[0]?.['QUERY PLAN'][0].Plan;
  if (!plan) throw new Error('no plan was given');
  return flat(plan);
}

const filters = (given: Partial<MeasurementFilters>): MeasurementFilters => ({ ...NO_FILTERS, ...given });
const page = (given: Partial<MeasurementFilters>, part: 'all' | 'with-d' | 'without-d') =>
  pageStatement(reader, filters(given), { part, after: null, wanted: 51 });
const narrow = { dFrom: 0.42, dTo: 0.44 };

describe('with 50,000 results', () => {
  test('there are so many, and the reader sees a quarter of them', async () => {
    const { rows } = await database.app.execute<{ all: number; mine: number }>(sql`
      select count(*) as all, count(*) filter (where notebook_id in
        (select notebook_id from notebook_member where person_id = ${reader.personId})) as mine from block_result`);
    expect(rows[0]).toEqual({ all: 50_000, mine: 12_500 });
  });

  test.each<[string, () => SQL]>([
    ['by D, from the smallest', () => page({ sort: 'd-asc' }, 'with-d')],
    ['by D, from the largest', () => page({ sort: 'd-desc' }, 'with-d')],
    ['by D, inside a range', () => page({ ...narrow, range: 'inside', sort: 'd-asc' }, 'with-d')],
    ['by D, overlapping a range', () => page({ ...narrow, sort: 'd-asc' }, 'with-d')],
    ['by D, one verdict', () => page({ verdict: ['confined'], sort: 'd-desc' }, 'with-d')],
    ['by date, newest first', () => page({}, 'all')],
    ['by date, inside a range', () => page({ ...narrow, range: 'inside' }, 'all')],
    ['by date, one notebook and verdict', () => page({ notebook: [somewhere], verdict: ['free'] }, 'all')],
    ['the results without D', () => page({ sort: 'd-asc' }, 'without-d')],
    ['a count inside a range', () => countStatement(reader, filters({ ...narrow, range: 'inside' }))],
    [
      'a count in one notebook',
      () => countStatement(reader, filters({ ...narrow, notebook: [somewhere], verdict: ['free'] })),
    ],
  ])('%s reads block_result through an index', async (_what, statement) => {
    const plan = await planOf(statement());
    expect(
      plan.filter((node) => node['Node Type'] === 'Seq Scan').map((node) => node['Relation Name']),
    ).not.toContain('block_result');
    const indexes = plan.map((node) => node['Index Name']).filter((name) => name !== undefined);
    expect(indexes.some((name) => name.startsWith('block_result_'))).toBe(true);
  });
});
