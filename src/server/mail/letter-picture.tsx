import { renderToStaticMarkup } from 'react-dom/server';
import sharp from 'sharp';
import { Comb, combInWords } from '../../drawings/Comb';
import { combGeometry } from '../../drawings/comb-geometry';
import { PAPER } from '../../drawings/paint';
import { Staircase, staircaseInWords } from '../../drawings/Staircase';
import { staircaseGeometry } from '../../drawings/staircase-geometry';
import type { StringNow } from '../../schemas/api/now';
import { textAsPaths } from './text-as-paths';
import { letterPicture } from '../../words/letters-sent';

/** The drawing in a letter: one string as its staircase, several as their combs. Drawn for a phone's width. */
export interface LetterPicture {
  png: Buffer;
  /** What it shows, for who does not see it. */
  alt: string;
}

/** CSS px that the picture takes in a letter; drawn three times as fine. */
export const PICTURE_WIDTH = 340;
const DENSITY = 72 * 3;
const STAIRCASE_HEIGHT = 230;
const ROW = 34;
const NAME_WIDTH = 64;
const ROWS_MAX = 8;

async function pngOf(markup: string, height: number): Promise<Buffer> {
  const inner = markup.replace(/^<svg[^>]*>|<\/svg>$/g, '');
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="${PICTURE_WIDTH}" height="${height}" viewBox="0 0 ${PICTURE_WIDTH} ${height}"><rect width="100%" height="100%" fill="${PAPER.sheet}"/>${textAsPaths(inner)}</svg>`;
  return sharp(Buffer.from(svg), { density: DENSITY }).png({ palette: true, effort: 4 }).toBuffer();
}

/** @returns null where there is no string to draw */
export async function stringsPicture(strings: readonly StringNow[]): Promise<LetterPicture | null> {
  const [first] = strings;
  if (!first) return null;
  if (strings.length === 1) {
    const input = {
      slots: first.slots,
      voltage: first.voltage,
      expectedVoltage: first.expectedVoltage,
      expectedInShutdown: first.expectedInShutdown,
    };
    const markup = renderToStaticMarkup(
      <Staircase id="s" width={PICTURE_WIDTH} height={STAIRCASE_HEIGHT} paint={PAPER} {...input} />,
    );
    const words = staircaseInWords(staircaseGeometry(input, PICTURE_WIDTH, STAIRCASE_HEIGHT), input);
    return {
      png: await pngOf(markup, STAIRCASE_HEIGHT),
      alt: letterPicture.stringFirstWords(first.name, words),
    };
  }
  const shown = strings.slice(0, ROWS_MAX);
  const more = strings.length - shown.length;
  const height = shown.length * ROW + (more > 0 ? 22 : 4);
  const width = PICTURE_WIDTH - NAME_WIDTH;
  const markup = renderToStaticMarkup(
    <svg>
      {shown.map((string, i) => (
        <g key={string.id} transform={`translate(0 ${i * ROW + 6})`}>
          <text x="0" y="17" fill={PAPER.ink} fontWeight="600" fontSize="13">
            {string.name.length > 9 ? `${string.name.slice(0, 8)}…` : string.name}
          </text>
          <g transform={`translate(${NAME_WIDTH} 0)`}>
            <Comb id={`c${i}`} slots={string.slots} width={width} height={24} paint={PAPER} />
          </g>
        </g>
      ))}
      {more > 0 && (
        <text x="0" y={shown.length * ROW + 16} fill={PAPER.ink2} fontSize="12">
          {letterPicture.andMore(more)}
        </text>
      )}
    </svg>,
  );
  const alt = shown
    .map((s) =>
      letterPicture.stringNameSlots(s.name, combInWords(s.slots, combGeometry(s.slots, width, 24).teeth)),
    )
    .join(' ');
  return { png: await pngOf(markup, height), alt };
}
