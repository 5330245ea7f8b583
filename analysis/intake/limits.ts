/** Version of how files are read: part of every reading, raised when the same bytes could come out differently. */
export const PARSER_VERSION = 'motebook-intake/1';

/** Largest file, bytes. Larger ones need reading block by block. */
export const MAX_BYTES = 20 * 1024 * 1024;
export const MAX_LINE_CHARACTERS = 1024 * 1024;
export const MAX_FIELD_CHARACTERS = 64 * 1024;
export const MAX_COLUMNS = 1000;
/** So many bad rows are kept with their text; all are counted. */
export const MAX_PROBLEMS_KEPT = 1000;
