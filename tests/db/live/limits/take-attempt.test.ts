import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { connect, type Database } from '../../../../db/client';
import { askReset } from '../../../../db/commands/person/ask-reset';
import {
  forgetWrongPasswords,
  settlePasswordAttempt,
  takePasswordAttempt,
} from '../../../../db/limits/sign-in';
import { SlowDown } from '../../../../db/limits/take-attempt';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';

let database: TestDatabase;
/** Two processes are two pools of connections. */
let first: Database;
let second: Database;
beforeAll(async () => {
  database = await createTestDatabase();
  first = database.app;
  second = connect(database.urls.motebook_app, { max: 4, name: 'test-second' });
});
afterAll(async () => {
  await second.$client.end();
  await database.drop();
});

const stopped = (run: Promise<unknown>) =>
  run.then(
    () => null,
    (error: unknown) => {
      if (error instanceof SlowDown) return error;
      throw error;
    },
  );

test('attempts through two processes are counted together, also when all come at once', async () => {
  const tries = Array.from({ length: 30 }, (_one, i) =>
    stopped(takePasswordAttempt(i % 2 === 0 ? first : second, 'together', `192.0.2.${i}`)),
  );
  const outcomes = await Promise.all(tries);
  // Five wrong passwords in ten minutes are let through, the sixth is not (S07).
  expect(outcomes.filter((one) => one === null)).toHaveLength(5);
  for (const one of outcomes.filter((found) => found !== null)) {
    expect(one.status).toBe(429);
    expect(one.seconds).toBeGreaterThan(590);
    expect(one.seconds).toBeLessThanOrEqual(600);
    expect(one.sentence).toMatch(/^Too many attempts\. Wait 10 minutes and try again\.$/);
  }
});

test('names that differ in case or blanks are one name; another name, known or not, is free', async () => {
  for (const name of ['Mira', ' mira', 'MIRA ', 'mira', 'mIra']) await takePasswordAttempt(first, name, null);
  expect(await stopped(takePasswordAttempt(second, 'mira', null))).not.toBeNull();
  expect(await stopped(takePasswordAttempt(second, 'tor', null))).toBeNull();
});

test('a right password begins a new count, and is not held against its address', async () => {
  for (let i = 0; i < 25; i++) {
    await takePasswordAttempt(first, 'right', '198.51.100.1');
    await settlePasswordAttempt(second, 'right', '198.51.100.1');
  }
  expect(await stopped(takePasswordAttempt(first, 'right', '198.51.100.1'))).toBeNull();
});

test('one address is stopped after ten wrong ones in a minute, whatever the names, and others go on (S54)', async () => {
  for (let i = 0; i < 10; i++) await takePasswordAttempt(first, `sprayed${i}`, '198.51.100.2');
  const over = await stopped(takePasswordAttempt(second, 'sprayed10', '198.51.100.2'));
  expect(over?.kind).toBe('sign-in.address');
  expect(over?.seconds).toBeLessThanOrEqual(60);
  expect(await stopped(takePasswordAttempt(second, 'sprayed11', '198.51.100.3'))).toBeNull();
});

test('when the span is over the count begins anew, but a hundred in a row are the end until a new password is set', async () => {
  let let_through = 0;
  for (let round = 0; round < 25; round++) {
    for (let i = 0; i < 5; i++)
      if ((await stopped(takePasswordAttempt(first, 'patient', null))) === null) let_through += 1;
    await database.app.execute(
      sql`UPDATE attempt SET started_at = started_at - interval '11 minutes' WHERE kind = 'sign-in.name'`,
    );
  }
  // NIST SP 800-63B-4, section 3.2.2: no more than 100 consecutive failed attempts on one account.
  expect(let_through).toBe(100);
  expect((await stopped(takePasswordAttempt(first, 'patient', null)))?.sentence).toMatch(/Set a new one/);
  await forgetWrongPasswords(first, ['patient']);
  expect(await stopped(takePasswordAttempt(first, 'patient', null))).toBeNull();
});

test('resets are three an hour for a name and for an address', async () => {
  for (let i = 0; i < 3; i++) await askReset(first, 'asked', `203.0.113.${i}`);
  expect((await stopped(askReset(second, 'asked', '203.0.113.9')))?.kind).toBe('reset.name');
  for (let i = 0; i < 3; i++) await askReset(second, `asked${i}`, '203.0.113.50');
  expect((await stopped(askReset(first, 'asked4', '203.0.113.50')))?.kind).toBe('reset.address');
});

test('what was typed is not kept', async () => {
  await takePasswordAttempt(first, 'perhaps a password', null);
  const { rows } = await database.app.execute<{ line: string }>(
    sql`SELECT attempt::text AS line FROM attempt`,
  );
  expect(rows.length).toBeGreaterThan(0);
  expect(rows.filter((row) => row.line.includes('perhaps'))).toEqual([]);
});
