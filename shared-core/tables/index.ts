export * from './match-files.ts';
export * from './read-lines.ts';
export * from './read-submissions.ts';
export * from './read-table.ts';
export * from './understand-header.ts';
export * from './understand-table.ts';
export * from './write-grades.ts';
export type * from './types.ts';
