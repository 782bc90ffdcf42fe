import { PAPER } from '../../drawings/paint';
import { lettersSentLetter } from '../../words/letters-sent';

/** A letter as plain text and as HTML from the same parts, so that neither says what the other does not. */
export interface LetterParts {
  greeting: string;
  /** What is found, above everything else. */
  finding?: string;
  /** Not shutting down: the only letter that may be crimson. */
  hazard?: boolean;
  paragraphs: readonly string[];
  /** A safety caution: its first words stand out. */
  caution?: { strong: string; rest: string };
  /** Whom to call: a number that a phone dials. */
  call?: { words: string; number: string };
  /** The drawing that is sent along, by its content id, and what it shows. */
  picture?: { cid: string; width: number; alt: string };
  /** What the reader may do next, with a full address. */
  action?: { words: string; href: string };
  /** Figures as name and value. */
  figures?: readonly (readonly [string, string])[];
  sections?: readonly LetterSection[];
  /** Why this came, and who sent it. */
  footer: string;
  /** How to get fewer of these. */
  wayOut?: { words: string; href: string };
}
export interface LetterSection {
  title: string;
  items: readonly { title: string; lines: readonly string[]; href?: string }[];
}

const NEEDS_ESCAPE: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};
export const escapeHtml = (text: string): string => text.replace(/[&<>"']/g, (c) => NEEDS_ESCAPE[c] ?? c);

// mail programs know no style sheets: the few colours of the product's light theme stand in the elements
const { ink: INK, ink2: INK_2, rule: RULE, film: FILM, petrol: PETROL, crimson: CRIMSON } = PAPER;
const CAUTION = '#f2c230';
const FONT = `'Inter Tight','Helvetica Neue',Arial,sans-serif`;

const p = (words: string, style = `margin:0 0 16px;font:16px/24px ${FONT};color:${INK}`): string =>
  `<p style="${style}">${escapeHtml(words)}</p>`;

function textOf(parts: LetterParts): string {
  const { greeting, finding, paragraphs, caution, picture, action, figures = [], sections = [] } = parts;
  const { footer, wayOut } = parts;
  const blocks = [
    ...(finding ? [parts.hazard ? lettersSentLetter.notShuttingDown(finding) : finding] : []),
    greeting,
    ...paragraphs,
    ...(parts.call ? [`${parts.call.words}: ${parts.call.number}`] : []),
    ...(caution ? [`! ${caution.strong} ${caution.rest}`] : []),
    ...(figures.length > 0 ? [figures.map(([name, value]) => `${name}: ${value}`).join('\n')] : []),
    ...(picture ? [lettersSentLetter.drawingAlt(picture.alt)] : []),
    ...sections.map(({ title, items }) =>
      [
        `${title.toUpperCase()}\n${'='.repeat(title.length)}`,
        ...items.map((i) =>
          [`* ${i.title}`, ...i.lines.map((l) => `  ${l}`), ...(i.href ? [`  ${i.href}`] : [])].join('\n'),
        ),
      ].join('\n\n'),
    ),
    ...(action ? [`${action.words}: ${action.href}`] : []),
    `-- \n${footer}${wayOut ? `\n${wayOut.words}: ${wayOut.href}` : ''}`,
  ];
  return `${blocks.join('\n\n')}\n`;
}

const figureRows = (figures: readonly (readonly [string, string])[]): string =>
  figures
    .map(
      ([name, value]) =>
        `<tr><td style="padding:6px 16px 6px 0;border-top:1px solid ${RULE};font:15px/20px ${FONT};color:${INK_2};vertical-align:top">${escapeHtml(name)}</td><td style="padding:6px 0;border-top:1px solid ${RULE};font:600 15px/20px ${FONT};color:${INK};vertical-align:top">${escapeHtml(value)}</td></tr>`,
    )
    .join('');

const sectionHtml = ({ title, items }: LetterSection): string =>
  `<h2 style="margin:24px 0 0;padding:10px 0 8px;border-top:2px solid ${INK};font:600 17px/22px ${FONT};color:${INK}">${escapeHtml(title)}</h2>${items
    .map(
      (item) =>
        `<div style="padding:10px 0 12px;border-top:1px solid ${RULE}">${
          item.href
            ? `<p style="margin:0 0 2px;font:600 16px/22px ${FONT}"><a href="${escapeHtml(item.href)}" style="color:${PETROL};text-decoration:underline">${escapeHtml(item.title)}</a></p>`
            : p(item.title, `margin:0 0 2px;font:600 16px/22px ${FONT};color:${INK}`)
        }${item.lines.map((line) => p(line, `margin:2px 0 0;font:15px/21px ${FONT};color:${INK}`)).join('')}</div>`,
    )
    .join('')}`;

/** @returns `text` with lines ended by a newline; `html` a whole document */
export function letter(parts: LetterParts): { text: string; html: string } {
  const { greeting, finding, hazard = false, paragraphs, caution, picture, action } = parts;
  const { figures = [], sections = [], footer, wayOut } = parts;
  const head = hazard
    ? `<p style="margin:-24px -24px 20px;padding:10px 24px;background:${CRIMSON};color:#ffffff;font:600 15px/20px ${FONT}">&#9670; Not shutting down</p>`
    : '';
  const title = finding
    ? `<h1 style="margin:0 0 16px;font:600 22px/28px ${FONT};letter-spacing:-0.02em;color:${INK}">${escapeHtml(finding)}</h1>`
    : '';
  const hello = finding
    ? p(greeting)
    : p(greeting, `margin:0 0 16px;font:600 18px/24px ${FONT};color:${INK}`);
  const dial = parts.call
    ? `<p style="margin:0 0 20px"><a href="tel:${escapeHtml(parts.call.number.replaceAll(/[^+\d]/g, ''))}" style="display:inline-block;border:1px solid ${INK};color:${INK};font:600 16px/24px ${FONT};text-decoration:none;padding:9px 18px;border-radius:4px">${escapeHtml(`${parts.call.words}: ${parts.call.number}`)}</a></p>`
    : '';
  const warns = caution
    ? `<p style="margin:0 0 20px;padding:12px 16px;background:${INK};color:#e8eef0;font:15px/22px ${FONT};border-radius:3px"><span style="color:${CAUTION}">&#9888;</span> <strong style="color:#ffffff">${escapeHtml(caution.strong)}</strong> ${escapeHtml(caution.rest)}</p>`
    : '';
  const drawing = picture
    ? `<p style="margin:0 0 20px;padding:8px 0;border-top:1px solid ${RULE};border-bottom:1px solid ${RULE}"><img src="cid:${escapeHtml(picture.cid)}" alt="${escapeHtml(picture.alt)}" width="${picture.width}" style="display:block;width:100%;max-width:${Math.round(picture.width * 1.3)}px;height:auto;font:14px/20px ${FONT};color:${INK_2}"></p>`
    : '';
  const table =
    figures.length > 0
      ? `<table role="presentation" style="width:100%;border-collapse:collapse;margin:0 0 20px">${figureRows(figures)}</table>`
      : '';
  const button = action
    ? `<p style="margin:${sections.length > 0 ? 20 : 8}px 0 0"><a href="${escapeHtml(action.href)}" style="display:inline-block;background:${INK};color:#ffffff;font:600 16px/24px ${FONT};text-decoration:none;padding:10px 18px;border-radius:4px">${escapeHtml(action.words)}</a></p>`
    : '';
  const small = `margin:16px 4px 0;font:13px/18px ${FONT};color:${INK_2}`;
  const out = wayOut
    ? `<p style="${small}"><a href="${escapeHtml(wayOut.href)}" style="color:${PETROL};text-decoration:underline">${escapeHtml(wayOut.words)}</a></p>`
    : '';
  const html = `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1"><meta name="color-scheme" content="light"><title>${escapeHtml(finding ?? 'Wakeline')}</title></head><body style="margin:0;background:${FILM}"><div style="max-width:560px;margin:0 auto;padding:20px 12px 32px"><div style="background:#ffffff;border-top:2px solid ${INK};border-bottom:1px solid ${RULE};padding:24px">${head}${title}${hello}${paragraphs.map((words) => p(words)).join('')}${dial}${warns}${table}${drawing}${sections.map(sectionHtml).join('')}${button}</div>${p(footer, small)}${out}</div></body></html>`;
  return { text: textOf(parts), html };
}
