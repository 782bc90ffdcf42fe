import * as fontkit from 'fontkit';
import type { Font } from 'fontkit';
import { runsOf, type Weight } from '../reports/pdf/faces';

/**
 * Text of a drawing as outlines of our type, so that a picture looks the same on a machine that has no such font.
 * Takes what our drawings are made of: `<text>` with attributes and nothing but characters inside.
 */
const fonts = new Map<string, Font>();
function fontOf(name: string, data: Buffer): Font {
  let font = fonts.get(name);
  if (!font) {
    const made = fontkit.create(data);
    if (!('layout' in made)) throw new Error(`${name} is a collection of fonts, not one`);
    fonts.set(name, (font = made));
  }
  return font;
}

const ENTITIES: Record<string, string> = { amp: '&', lt: '<', gt: '>', quot: '"', '#x27': "'", '#39': "'" };
const unescaped = (text: string): string =>
  text.replace(/&(amp|lt|gt|quot|#x27|#39);/g, (_, name: string) => ENTITIES[name] ?? '');

const DEFAULT_SIZE = 12;

/** Outlines of one line beginning at 0, and how wide it is. */
function outlines(text: string, weight: Weight, size: number): { paths: string; width: number } {
  let x = 0;
  let paths = '';
  for (const run of runsOf(text, weight)) {
    const font = fontOf(run.face.name, run.face.data);
    const scale = size / font.unitsPerEm;
    const { glyphs, positions } = font.layout(run.text);
    glyphs.forEach((glyph, i) => {
      const at = positions[i];
      const d = glyph.path.toSVG();
      if (d)
        paths += `<path transform="translate(${(x + (at?.xOffset ?? 0) * scale).toFixed(2)} 0) scale(${scale} ${-scale})" d="${d}"/>`;
      x += (at?.xAdvance ?? 0) * scale;
    });
  }
  return { paths, width: x };
}

/** @returns the drawing without any text of its own */
export function textAsPaths(svg: string): string {
  return svg.replace(/<text\b([^>]*)>([^<]*)<\/text>/g, (_, attributes: string, inner: string) => {
    const of = (name: string): string | undefined =>
      new RegExp(`(?:^|\\s)${name}="([^"]*)"`).exec(attributes)?.[1];
    const weight: Weight = Number(of('font-weight') ?? 400) >= 550 ? 600 : 400;
    const { paths, width } = outlines(unescaped(inner), weight, Number(of('font-size') ?? DEFAULT_SIZE));
    const anchor = of('text-anchor');
    const shift = anchor === 'middle' ? -width / 2 : anchor === 'end' ? -width : 0;
    const move = `translate(${Number(of('x') ?? 0) + shift} ${Number(of('y') ?? 0)})`;
    const transform = [of('transform'), move].filter(Boolean).join(' ');
    return `<g transform="${transform}" fill="${of('fill') ?? '#000000'}">${paths}</g>`;
  });
}
