import fs from 'node:fs';

/** Migrations that this program was written for: put in by the build, read from their folder where there is none. */
export const migrationsKnown = (): readonly string[] =>
  typeof WAKELINE_MIGRATIONS === 'undefined'
    ? fs
        .readdirSync(new URL('../../../migrations', import.meta.url))
        .filter((file) => file.endsWith('.ts'))
        .sort()
    : WAKELINE_MIGRATIONS;
