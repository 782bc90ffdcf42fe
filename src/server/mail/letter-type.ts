import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';

/** Our type inside a letter, for the mail programs that take it along; the others show their own. */
const resolve = createRequire(import.meta.url).resolve;
const WEIGHTS = [400, 600] as const;
let style: string | undefined;

function typeStyle(): string {
  style ??= `<style>${WEIGHTS.map((weight) => {
    const data = readFileSync(
      resolve(`@fontsource/inter-tight/files/inter-tight-latin-${weight}-normal.woff2`),
    );
    return `@font-face{font-family:'Inter Tight';font-weight:${weight};src:url(data:font/woff2;base64,${data.toString('base64')}) format('woff2')}`;
  }).join('')}</style>`;
  return style;
}

/** The document with our type in its head: added as it is sent, so that the outbox stays small. */
export const withType = (html: string): string => html.replace('</head>', () => `${typeStyle()}</head>`);

/** The document as it was written: pages of the product take no style element. */
export const withoutType = (html: string): string => html.replaceAll(/<style>[\s\S]*?<\/style>/g, '');
