// The one list of tables: drizzle needs them together, for migrations and for typed queries.
export * from './lab';
export * from './person';
export * from './mail';
export * from './attempt';
export * from './notebook';
export * from './entry';
export * from './file';
export * from './result';
export * from './audit';
