/** A letter as plain text and as HTML from the same parts, so that neither says what the other does not. */
export interface LetterParts {
  greeting: string;
  paragraphs: readonly string[];
  /** What the reader may do next, with a full address. */
  action?: { words: string; href: string };
  /** Figures as name and value. */
  figures?: readonly (readonly [string, string])[];
  /** Why this came, and who sent it. */
  footer: string;
}

const NEEDS_ESCAPE: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};
export const escapeHtml = (text: string): string => text.replace(/[&<>"']/g, (c) => NEEDS_ESCAPE[c] ?? c);

const FONT = `'Inter Tight','Helvetica Neue',Arial,sans-serif`;
// mail programs know no style sheets: the few colours of the product's light theme stand in the elements
const INK = '#13212b';
const INK_2 = '#4b5c66';
const RULE = '#d5dcd9';

/** @returns `text` with lines ended by a newline; `html` a whole document */
export function letter(parts: LetterParts): { text: string; html: string } {
  const { greeting, paragraphs, action, figures = [], footer } = parts;
  const text = [
    greeting,
    ...paragraphs,
    ...(figures.length > 0 ? [figures.map(([name, value]) => `${name}: ${value}`).join('\n')] : []),
    ...(action ? [`${action.words}: ${action.href}`] : []),
    `-- \n${footer}`,
  ].join('\n\n');
  const p = (words: string) =>
    `<p style="margin:0 0 16px;font:16px/24px ${FONT};color:${INK}">${escapeHtml(words)}</p>`;
  const rows = figures
    .map(
      ([name, value]) =>
        `<tr><td style="padding:6px 16px 6px 0;border-top:1px solid ${RULE};font:15px/20px ${FONT};color:${INK_2}">${escapeHtml(name)}</td><td style="padding:6px 0;border-top:1px solid ${RULE};font:600 15px/20px ${FONT};color:${INK}">${escapeHtml(value)}</td></tr>`,
    )
    .join('');
  const html = `<!doctype html><html lang="en"><head><meta charset="utf-8"><title>Wakeline</title></head><body style="margin:0;background:#f3f5f4"><div style="max-width:560px;margin:0 auto;padding:32px 20px"><div style="background:#ffffff;border-top:2px solid ${INK};border-bottom:1px solid ${RULE};padding:24px"><p style="margin:0 0 16px;font:600 18px/24px ${FONT};color:${INK}">${escapeHtml(greeting)}</p>${paragraphs.map(p).join('')}${rows ? `<table role="presentation" style="width:100%;border-collapse:collapse;margin:0 0 20px">${rows}</table>` : ''}${action ? `<p style="margin:8px 0 0"><a href="${escapeHtml(action.href)}" style="display:inline-block;background:${INK};color:#ffffff;font:600 16px/24px ${FONT};text-decoration:none;padding:10px 18px;border-radius:4px">${escapeHtml(action.words)}</a></p>` : ''}</div><p style="margin:16px 0 0;font:13px/18px ${FONT};color:${INK_2}">${escapeHtml(footer)}</p></div></body></html>`;
  return { text: `${text}\n`, html };
}
