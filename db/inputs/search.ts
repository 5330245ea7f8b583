import { z } from 'zod';

/** What may be asked of Search and what is answered. */

export const SEARCH_PAGE_ROWS = 20;
const PAGES_MAX = 25;

/** Words as people type them: "two words" in quotes stand together, -word must not be there, or means either. */
export const searchWords = z
  .string()
  .trim()
  .max(200, 'Search for fewer words: at most 200 characters.')
  // Characters that no text holds, and that PostgreSQL refuses.
  .transform((text) => text.replaceAll(/\p{Cc}+/gu, ' '));

/** Query string of the page. What cannot be used is left out: an address is not a form. */
export const searchQuery = z.object({
  q: searchWords.catch(''),
  by: z.uuid().nullable().catch(null).default(null),
  page: z.coerce.number().int().min(1).max(PAGES_MAX).catch(1).default(1),
});
export type SearchQuery = z.output<typeof searchQuery>;

/** A piece of text, and whether it is what was searched for. */
export const textPiece = z.object({ text: z.string(), hit: z.boolean() });
export type TextPiece = z.output<typeof textPiece>;

/** Query string of `GET /api/go-to`. */
export const goToQuery = z.object({ q: searchWords });

export const goToAnswer = z.object({
  entries: z.array(
    z.object({
      id: z.uuid(),
      code: z.string(),
      number: z.number().int(),
      title: z.string(),
      date: z.string(),
      state: z.enum(['draft', 'closing', 'signed', 'countersigned', 'void']),
    }),
  ),
  notebooks: z.array(z.object({ id: z.uuid(), code: z.string(), title: z.string() })),
  people: z.array(z.object({ id: z.uuid(), name: z.string() })),
});
export type GoToAnswer = z.output<typeof goToAnswer>;
