/** The tokens as the canvas needs them: resolved colours, read again when the theme changes. */
export const TOKENS = [
  'film',
  'sheet',
  'rule',
  'rule-faint',
  'ink',
  'ink-2',
  'ink-3',
  'petrol',
  'petrol-wash',
  'plum',
  'plum-wash',
  'rust',
  'rust-ink',
  'crimson',
  'slate',
  'slate-wash',
] as const;
export type Colours = Record<(typeof TOKENS)[number], string>;

export function readColours(): Colours {
  const probe = document.createElement('span');
  probe.hidden = true;
  document.body.append(probe);
  const colours = {} as Colours;
  for (const name of TOKENS) {
    probe.style.color = `var(--${name})`;
    colours[name] = getComputedStyle(probe).color;
  }
  probe.remove();
  return colours;
}

/** Calls when the person or the device changes the theme. */
export function onThemeChange(call: () => void): () => void {
  const media = matchMedia('(prefers-color-scheme: dark)');
  media.addEventListener('change', call);
  document.addEventListener('themechange', call);
  return () => {
    media.removeEventListener('change', call);
    document.removeEventListener('themechange', call);
  };
}
