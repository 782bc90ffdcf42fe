/** Backslashes and control characters, which browsers read as something else than they are. */
const isTreacherous = (text: string): boolean => [...text].some((c) => c === '\\' || c < ' ');

/** Where sign-in leads: a path of our own, never an address elsewhere. */
export function returnPath(wanted: string | undefined, fallback: string): string {
  if (!wanted || !wanted.startsWith('/') || wanted.startsWith('//') || isTreacherous(wanted)) return fallback;
  const base = 'http://own.invalid';
  const url = new URL(wanted, base);
  return url.origin === base && !url.pathname.startsWith('/api/') && !url.pathname.startsWith('//')
    ? url.pathname + url.search
    : fallback;
}
