import type { ReactElement } from 'react';
import { renderToStaticMarkup } from 'react-dom/server';
import sharp from 'sharp';
import type { FiguresString } from '../../../domain/cases/figures';
import { staircaseOf } from '../../../drawings/case-figures';
import { HistoryLines } from '../../../drawings/HistoryLines';
import { PAPER } from '../../../drawings/paint';
import { Staircase } from '../../../drawings/Staircase';
import type { StringHistory } from '../../../schemas/api/string';
import { textAsPaths } from '../../mail/text-as-paths';

/** Drawings of the evidence as pictures for paper, with our own type. */
export interface PaperDrawing {
  png: Buffer;
  /** Height over width. */
  ratio: number;
}

const WIDTH = 720;
/** Three times as fine as CSS pixels: clear on a printer. */
const DENSITY = 72 * 3;

async function drawn(drawing: ReactElement, height: number): Promise<PaperDrawing> {
  const inner = renderToStaticMarkup(drawing).replace(/^<svg[^>]*>|<\/svg>$/g, '');
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="${WIDTH}" height="${height}" viewBox="0 0 ${WIDTH} ${height}"><rect width="100%" height="100%" fill="${PAPER.sheet}"/>${textAsPaths(inner)}</svg>`;
  // without transparency a PDF takes it as it is; a palette would cost more time than its bytes are worth
  const png = await sharp(Buffer.from(svg), { density: DENSITY })
    .flatten({ background: PAPER.sheet })
    .png({ compressionLevel: 6 })
    .toBuffer();
  return { png, ratio: height / WIDTH };
}

export function staircaseDrawing(string: FiguresString): Promise<PaperDrawing> {
  const height = 250;
  return drawn(
    <Staircase id="s" width={WIDTH} height={height} paint={PAPER} {...staircaseOf(string)} />,
    height,
  );
}

export function historyDrawing(history: StringHistory, label: string): Promise<PaperDrawing> {
  const height = 210;
  return drawn(
    <HistoryLines
      from={history.from}
      to={history.to}
      timeZone={history.timeZone}
      unit={history.unit}
      measured={{ at: history.at, values: history.values }}
      expected={history.expected}
      middle={history.middle}
      nights={history.nights}
      marks={history.marks}
      label={label}
      width={WIDTH}
      height={height}
      paint={PAPER}
    />,
    height,
  );
}
