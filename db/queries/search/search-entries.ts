import { and, desc, eq, sql, type SQL } from 'drizzle-orm';
import type { Connection } from '../../client';
import { SEARCH_PAGE_ROWS, type SearchQuery, type TextPiece } from '../../inputs/search';
import type { Actor } from '../../policies/may';
import { mayReadNotebook } from '../../policies/notebook-filter';
import { entry, entryText, notebook } from '../../schema/index';
import { ledgerColumns, type LedgerEntry } from '../entry/list-entries';

/** An entry that was found, with where the words stand in it. */
export interface FoundEntry extends LedgerEntry {
  readonly titlePieces: TextPiece[];
  /** Passages of the text; empty when only the title, or the author, was found. */
  readonly passages: TextPiece[][];
}

export interface Found {
  readonly entries: FoundEntry[];
  /** How many there are, counted to a thousand. */
  readonly count: number;
  readonly pages: number;
  /** Titles that look like what was typed, when nothing was found: perhaps it was mistyped. */
  readonly alike: { readonly id: string; readonly title: string }[];
}

const COUNTED = 1000;
/** Marks that no text holds (control characters are taken out on the way in), so that nothing can pass for a hit. */
const OPEN = '\u0002';
const CLOSE = '\u0003';
const PASSAGE_BREAK = '\u0004';
/** Stand for < and > meanwhile: PostgreSQL takes what lies between for markup and leaves it out of passages. */
const [LESS, MORE] = ['\u0005', '\u0006'];
const PLAIN = `<>${OPEN}${CLOSE}${PASSAGE_BREAK}`;
const KEPT = `${LESS}${MORE}`;
const inPassages = `StartSel=${OPEN}, StopSel=${CLOSE}, MaxFragments=2, MaxWords=24, MinWords=10, FragmentDelimiter=${PASSAGE_BREAK}`;
const inTitle = `StartSel=${OPEN}, StopSel=${CLOSE}, HighlightAll=true`;

/**
 * Entries that the actor may read and whose title or text holds the words, best first; with `by`, only those that this person
 * wrote in. Without words: that person's entries, newest first. Nothing asked, nothing found.
 */
export async function searchEntries(db: Connection, actor: Actor, query: SearchQuery): Promise<Found> {
  const none: Found = { entries: [], count: 0, pages: 0, alike: [] };
  if (query.q === '' && query.by === null) return none;
  const words = sql`websearch_to_tsquery('english', ${query.q})`;
  const titleWords = sql`to_tsvector('english', ${entry.title})`;
  const matches =
    query.q === '' ? undefined : sql`(${entryText.words} @@ ${words} or ${titleWords} @@ ${words})`;
  const where = and(mayReadNotebook(actor, entry.notebookId), matches, writtenBy(query.by));
  const rank = sql`ts_rank_cd(setweight(${titleWords}, 'A') || coalesce(${entryText.words}, ''::tsvector), ${words}, 1)`;
  // The best ones are chosen first; only their texts are cut into passages, which is slow.
  const best = await db
    .select({ id: entry.id })
    .from(entry)
    .leftJoin(entryText, eq(entryText.entryId, entry.id))
    .where(where)
    .orderBy(...(query.q === '' ? [] : [desc(rank)]), desc(entry.experimentDate), entry.id)
    .limit(SEARCH_PAGE_ROWS)
    .offset((query.page - 1) * SEARCH_PAGE_ROWS);
  const counted = await db.select({ count: sql<number>`count(*)::int` }).from(
    db
      .select({ one: sql`1`.as('one') })
      .from(entry)
      .leftJoin(entryText, eq(entryText.entryId, entry.id))
      .where(where)
      .limit(COUNTED)
      .as('found'),
  );
  const count = counted[0]?.count ?? 0;
  if (best.length === 0) {
    return {
      ...none,
      count,
      alike: count === 0 && query.q !== '' ? await titlesAlike(db, actor, query.q) : [],
    };
  }
  const text = (column: SQL, options: string) =>
    query.q === ''
      ? sql<string | null>`null`
      : sql<string>`ts_headline('english', ${column}, ${words}, ${options})`;
  const rows = await db
    .select({
      ...ledgerColumns,
      heading: text(sql`translate(${entry.title}, ${PLAIN}, ${KEPT})`, inTitle),
      passages: text(sql`translate(coalesce(${entryText.plain}, ''), ${PLAIN}, ${KEPT})`, inPassages),
    })
    .from(entry)
    .innerJoin(notebook, eq(notebook.id, entry.notebookId))
    .leftJoin(entryText, eq(entryText.entryId, entry.id))
    .where(sql`${entry.id} = any(${sql.param(best.map(({ id }) => id))}::uuid[])`);
  const byId = new Map(rows.map((row) => [row.id, row]));
  return {
    entries: best.flatMap(({ id }) => {
      const row = byId.get(id);
      if (!row) return [];
      const { heading, passages, ...line } = row;
      return [{ ...line, titlePieces: cut(heading ?? line.title), passages: passagesOf(passages) }];
    }),
    count,
    pages: Math.ceil(count / SEARCH_PAGE_ROWS),
    alike: [],
  };
}

/** The entry was begun by this person, or an edit of theirs reached it. */
function writtenBy(personId: string | null): SQL | undefined {
  if (personId === null) return undefined;
  return sql`(${entry.createdBy} = ${personId}::uuid or exists (
    select 1 from entry_update u where u.entry_id = ${entry.id} and u.person_id = ${personId}::uuid))`;
}

async function titlesAlike(db: Connection, actor: Actor, typed: string) {
  return db
    .select({ id: entry.id, title: entry.title })
    .from(entry)
    .where(
      and(
        mayReadNotebook(actor, entry.notebookId),
        sql`trigram.word_similarity(lower(${typed}), lower(${entry.title})) > 0.35`,
      ),
    )
    .orderBy(desc(sql`trigram.word_similarity(lower(${typed}), lower(${entry.title}))`), entry.id)
    .limit(3);
}

function passagesOf(text: string | null): TextPiece[][] {
  if (text === null) return [];
  return text
    .split(PASSAGE_BREAK)
    .map(cut)
    .filter((pieces) => pieces.some(({ hit }) => hit));
}

/** Text with marks as pieces. */
function cut(text: string): TextPiece[] {
  const plain = text.replaceAll(LESS, '<').replaceAll(MORE, '>');
  return plain.split(OPEN).flatMap((part, at) => {
    const end = at === 0 ? -1 : part.indexOf(CLOSE);
    const pieces =
      end < 0
        ? [{ text: part, hit: false }]
        : [
            { text: part.slice(0, end), hit: true },
            { text: part.slice(end + 1), hit: false },
          ];
    return pieces.filter((piece) => piece.text !== '');
  });
}
