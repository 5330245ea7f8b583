/** Version of how files are read: part of every reading, raised when the same bytes could come out differently. */
export const PARSER_VERSION = 'motebook-intake/1';

/** Largest file, bytes. Larger ones need reading block by block. */
export const MAX_BYTES = 20 * 1024 * 1024;
/** Longest line, characters. */
export const MAX_LINE_CHARACTERS = 1024 * 1024;
/** Longest cell, characters; also how far a quotation mark may be from the one that closes it. */
export const MAX_FIELD_CHARACTERS = 64 * 1024;
export const MAX_COLUMNS = 1000;
/** So much of a file is looked at to understand it, characters. */
export const HEAD_CHARACTERS = 64 * 1024;
/** So many rows with problems are kept with their text; all are counted. */
export const MAX_PROBLEMS_KEPT = 1000;
/** Characters of a line that are kept to show what could not be used. */
export const MAX_PROBLEM_TEXT = 200;
/** Rows kept for the preview table. */
export const PREVIEW_ROWS = 12;
