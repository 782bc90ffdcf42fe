import fs from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import type { Plugin } from 'vite';

const WORDS = fileURLToPath(new URL('../words', import.meta.url));
const OWN = 'en'; // the words of src/words itself

/**
 * The site in another language: what the sources import from `src/words` comes from `src/words/LANGUAGE`, file by file.
 * A language that lacks a file stops the build, and one that lacks a text does by its types.
 * @param words where the languages' folders are, if not in src/words
 */
export function language(name: string | undefined, words = WORDS): Plugin[] {
  if (!name || name === OWN) return [];
  const folder = path.join(words, name);
  if (!/^[a-z]{2,3}(-[a-z]{2,4})?$/.test(name) || !fs.existsSync(folder))
    throw new Error(`WAKELINE_LANGUAGE: there is no folder src/words/${name}. Leave it out for English.`);
  return [
    {
      name: 'wakeline-language',
      enforce: 'pre',
      async resolveId(source, importer, options) {
        const asked = importer?.split('?')[0];
        if (!asked || !/^[./]/.test(source) || path.dirname(asked) === folder) return null;
        const found = await this.resolve(source, importer, { ...options, skipSelf: true });
        if (!found || path.dirname(found.id) !== WORDS) return null;
        const said = path.join(folder, path.basename(found.id));
        if (!fs.existsSync(said))
          throw new Error(`src/words/${name} has no ${path.basename(found.id)}, which ${importer} needs`);
        return said;
      },
    },
  ];
}
