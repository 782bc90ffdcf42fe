import { createHash } from 'node:crypto';
import only from 'astro/runtime/client/only.prebuilt.js';
import idle from 'astro/runtime/client/idle.prebuilt.js';
import load from 'astro/runtime/client/load.prebuilt.js';
import visible from 'astro/runtime/client/visible.prebuilt.js';
import { ISLAND_STYLES } from 'astro/runtime/server/astro-island-styles.js';
import island from 'astro/runtime/server/astro-island.prebuilt.js';

/**
 * Every script that stands in a page itself instead of in a file: those by which Astro wakes islands, and one of ours.
 * The browser runs these and no other, by their hashes. A page that brings another one is dead, which its tests notice.
 */

/** The schema library would try `eval` to find out whether it may; our policy says no, and browsers report the try. */
export const SCHEMAS_WITHOUT_EVAL = 'globalThis.__zod_globalConfig={jitless:true}';

const hashOf = (text: string): string => `'sha256-${createHash('sha256').update(text).digest('base64')}'`;

export const SCRIPT_HASHES = [SCHEMAS_WITHOUT_EVAL, island, load, idle, visible, only].map(hashOf);
export const STYLE_HASHES = [ISLAND_STYLES].map(hashOf);
