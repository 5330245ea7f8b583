import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { searchQuery, type SearchQuery } from '../../../../db/inputs/search';
import type { Actor } from '../../../../db/policies/may';
import { findColleague } from '../../../../db/queries/search/find-colleague';
import { goTo } from '../../../../db/queries/search/go-to';
import { searchEntries } from '../../../../db/queries/search/search-entries';
import { entryText } from '../../../../db/schema/index';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import { makeEntry, makeMember, makeNotebook, makePerson } from '../../../helpers/factories';

let database: TestDatabase;
let owner: Actor;
let reader: Actor;
let outsider: Actor;
const ids: Record<string, string> = {};

async function write(name: string, notebookId: string, title: string, plain: string): Promise<void> {
  const id = await makeEntry(database.app, notebookId, owner, { title });
  ids[name] = id;
  await database.app.insert(entryText).values({ entryId: id, epoch: 1, seq: 1, plain });
}

beforeAll(async () => {
  database = await createTestDatabase();
  const db = database.app;
  owner = await makePerson(db, { role: 'pi', name: 'Ada Lindqvist' });
  reader = await makePerson(db, { name: 'Bela Moreau' });
  outsider = await makePerson(db, { admin: true, name: 'Cyril Outside' });
  const open = await makeNotebook(db, owner, {
    code: 'OPN',
    title: 'Bead runs',
    members: [[reader, 'reader']],
  });
  const closed = await makeNotebook(db, owner, { code: 'CLO', title: 'Bead secrets' });
  await write(
    'beads',
    open.id,
    'Beads in glycerol',
    'The sealed chamber held beads in forty percent glycerol. Their motion slowed.',
  );
  await write(
    'vesicles',
    open.id,
    'Vesicles',
    'A vesicle crossed the field; beads were not seen. The chamber leaked.',
  );
  await write('blank', open.id, '', '');
  await write('secret', closed.id, 'Beads elsewhere', 'Sealed chamber and beads, not for all.');
  await write(
    'hostile',
    open.id,
    'Marks \u0002inside\u0003',
    'A <script>alert(1)</script> and \u0002forged\u0003 marks & <b>bold</b> beads.',
  );
});
afterAll(() => database.drop());

const ask = (actor: Actor, query: Partial<SearchQuery>) =>
  searchEntries(database.app, actor, { q: '', by: null, page: 1, ...query });
const found = async (actor: Actor, q: string) => (await ask(actor, { q })).entries.map((one) => one.id);

describe('full text', () => {
  test('finds words in titles and texts, titles first, in any of their forms', async () => {
    expect(await found(owner, 'glycerol')).toEqual([ids.beads]);
    expect((await found(reader, 'bead'))[0]).toBe(ids.beads);
    expect(await found(reader, 'slow motion')).toEqual([ids.beads]);
  });

  test('understands quotes, minus and or', async () => {
    expect(await found(reader, '"sealed chamber"')).toEqual([ids.beads]);
    expect(await found(reader, 'chamber -glycerol')).toEqual([ids.vesicles]);
    expect((await found(reader, 'glycerol or vesicle')).sort()).toEqual([ids.beads, ids.vesicles].sort());
  });

  test('shows where the words stand, and only that is marked', async () => {
    const { entries } = await ask(reader, { q: 'sealed' });
    const hits = entries[0]!.passages.flat().filter((piece) => piece.hit);
    expect(hits.map((piece) => piece.text)).toEqual(['sealed']);
    expect(entries[0]!.titlePieces).toEqual([{ text: 'Beads in glycerol', hit: false }]);
  });

  test('text that looks like markup or like a mark stays text', async () => {
    const { entries } = await ask(reader, { q: 'forged' });
    expect(entries[0]!.id).toBe(ids.hostile);
    const pieces = entries[0]!.passages.flat();
    expect(pieces.filter((piece) => piece.hit).map((piece) => piece.text)).toEqual(['forged']);
    expect(pieces.map((piece) => piece.text).join('')).toContain('script>alert(1)</script>');
    expect(entries[0]!.titlePieces).toEqual([{ text: 'Marks inside', hit: false }]);
  });

  test('never finds, counts or suggests what may not be read', async () => {
    expect(await found(reader, '"not for all"')).toEqual([]);
    expect(await ask(outsider, { q: 'beads' })).toEqual({ entries: [], count: 0, pages: 0, alike: [] });
    const mistyped = await ask(reader, { q: 'beds elsewere' });
    expect(mistyped.alike.map(({ id }) => id)).not.toContain(ids.secret);
    expect((await ask(owner, { q: 'beds elsewere' })).alike.map(({ id }) => id)).toContain(ids.secret);
  });

  test('by a person: what they wrote in, with or without words', async () => {
    const all = await ask(reader, { by: owner.personId });
    expect(all.count).toBe(4);
    expect((await ask(reader, { by: reader.personId })).count).toBe(0);
    expect((await ask(reader, { by: owner.personId, q: 'vesicle' })).entries.map(({ id }) => id)).toEqual([
      ids.vesicles,
    ]);
  });

  test.each([
    '',
    '   ',
    '"',
    "'); drop table entry; --",
    '& | ! ( )',
    '\\',
    'a:*',
    'x'.repeat(200),
    '\u0000',
  ])('words such as %j are no trouble', async (q) => {
    const query = searchQuery.parse({ q });
    expect((await searchEntries(database.app, reader, query)).entries).toBeInstanceOf(Array);
    expect((await goTo(database.app, reader, query.q)).entries).toBeInstanceOf(Array);
  });

  test('an address that cannot be used asks for nothing', () => {
    expect(searchQuery.parse({ q: 'x'.repeat(500), by: 'nobody', page: '-3' })).toEqual({
      q: '',
      by: null,
      page: 1,
    });
  });

  test('a very long text is kept and found by its beginning', async () => {
    const long = await makeEntry(database.app, (await makeNotebook(database.app, owner)).id, owner, {
      title: 'Long',
    });
    const words = Array.from({ length: 250_000 }, (_, i) => `w${i}`).join(' ');
    await database.app
      .insert(entryText)
      .values({ entryId: long, epoch: 1, seq: 1, plain: `needle ${words}` });
    expect(await found(owner, 'needle')).toEqual([long]);
  });

  test('pages follow each other without a gap or a double', async () => {
    const many = await makeNotebook(database.app, owner, { code: 'MNY', title: 'Many' });
    for (let i = 0; i < 45; i++) await write(`many${i}`, many.id, `Run ${i}`, 'pagination of beads');
    const pages = await Promise.all([1, 2, 3].map((page) => ask(owner, { q: 'pagination', page })));
    expect(pages.map(({ entries }) => entries.length)).toEqual([20, 20, 5]);
    expect(pages[0]).toMatchObject({ count: 45, pages: 3 });
    expect(new Set(pages.flatMap(({ entries }) => entries.map(({ id }) => id))).size).toBe(45);
  });
});

describe('go to', () => {
  test('an entry by its number, with or without its notebook’s code', async () => {
    for (const typed of ['OPN 2', 'opn2', 'opn-2', '2'])
      expect((await goTo(database.app, reader, typed)).entries[0]?.id).toBe(ids.vesicles);
    expect((await goTo(database.app, reader, 'CLO 1')).entries).toEqual([]);
  });

  test('by a part of the title, a notebook, a person; signs of patterns are letters', async () => {
    const answer = await goTo(database.app, reader, 'glyc');
    expect(answer.entries.map(({ id }) => id)).toEqual([ids.beads]);
    expect((await goTo(database.app, reader, 'bead runs')).notebooks.map(({ code }) => code)).toEqual([
      'OPN',
    ]);
    expect((await goTo(database.app, reader, 'lindq')).people.map(({ name }) => name)).toEqual([
      'Ada Lindqvist',
    ]);
    expect((await goTo(database.app, reader, '%')).entries).toEqual([]);
  });

  test('people who share no notebook are not there', async () => {
    expect((await goTo(database.app, reader, 'outside')).people).toEqual([]);
    expect(await findColleague(database.app, reader, outsider.personId)).toBeNull();
    expect(await findColleague(database.app, reader, owner.personId)).toMatchObject({
      name: 'Ada Lindqvist',
    });
  });

  test('somebody deactivated finds nothing', async () => {
    const gone = await makePerson(database.app, { active: false });
    const { id } = await makeNotebook(database.app, owner);
    await makeMember(database.app, id, gone, 'reader');
    expect(await goTo(database.app, gone, 'bead')).toEqual({ entries: [], notebooks: [], people: [] });
  });
});
