import { paperWords } from '../../../words/papers-handover';
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import * as fontkit from 'fontkit';

/**
 * The product's type for paper. The face comes in subsets by script; each run of a text is set in the first subset
 * that has its glyphs. (WOFF: the other packing of these files can't be cut down to the glyphs used.)
 */
export type Weight = 400 | 600;
const SUBSETS = ['latin', 'latin-ext', 'greek', 'cyrillic', 'vietnamese'] as const;
type Subset = (typeof SUBSETS)[number];

export interface Face {
  /** `weight subset`, as the document registers it. */
  name: string;
  data: Buffer;
  has(codePoint: number): boolean;
}

const resolve = createRequire(import.meta.url).resolve;
const loaded = new Map<string, Face>();

function face(subset: Subset, weight: Weight): Face {
  const name = `${weight} ${subset}`;
  const known = loaded.get(name);
  if (known) return known;
  const data = readFileSync(
    resolve(`@fontsource/inter-tight/files/inter-tight-${subset}-${weight}-normal.woff`),
  );
  const font = fontkit.create(data);
  if (!('hasGlyphForCodePoint' in font)) throw new Error(`${name} is a collection of fonts, not one`);
  const made: Face = { name, data, has: (codePoint) => font.hasGlyphForCodePoint(codePoint) };
  loaded.set(name, made);
  return made;
}

/** What no subset has, in signs that one has. */
const SAID_OTHERWISE: Record<string, string> = {
  ...paperWords.signs,
  '\u202f': '\u00a0',
  '\u2011': '-',
  Ω: 'Ω', // the ohm sign is the Greek letter
};

export interface Run {
  text: string;
  face: Face;
}

/** A text as runs of one face each; what no subset has becomes "?". */
export function runsOf(text: string, weight: Weight): Run[] {
  const runs: Run[] = [];
  const add = (sign: string): boolean => {
    const codePoint = sign.codePointAt(0) ?? 0;
    const last = runs.at(-1);
    // blanks stay with the run that they follow
    const found =
      last?.face.has(codePoint) === true
        ? last.face
        : SUBSETS.map((subset) => face(subset, weight)).find((f) => f.has(codePoint));
    if (!found) return false;
    if (last?.face === found) last.text += sign;
    else runs.push({ text: sign, face: found });
    return true;
  };
  for (const sign of text.replaceAll(/[^\P{C}\n]/gu, '')) {
    if (add(sign)) continue;
    for (const other of SAID_OTHERWISE[sign] ?? '?') add(other);
  }
  return runs;
}
