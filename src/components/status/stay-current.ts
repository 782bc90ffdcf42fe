const EVERY_MS = 30_000;
const ANSWERED_WITHIN_MS = 20_000;

/** Somebody reads or marks something in there: what changes under them would be in their way. */
const inUse = (part: Element): boolean =>
  part.contains(document.activeElement) || !(document.getSelection()?.isCollapsed ?? true);

/**
 * Reads the page's part marked `data-current` again every half minute while the page is in view. Where that fails what
 * stands there stays, and the sentence marked `data-not-current` says so.
 */
export function stayCurrent(): void {
  const read = async (): Promise<Element | null> => {
    const answer = await fetch(location.href, { signal: AbortSignal.timeout(ANSWERED_WITHIN_MS) });
    if (!answer.ok) return null;
    return new DOMParser().parseFromString(await answer.text(), 'text/html').querySelector('[data-current]');
  };
  const again = async (): Promise<void> => {
    const part = document.querySelector('[data-current]');
    if (!part || document.hidden) return;
    // out of reach, or not in time: the same as an answer without what is sought
    const fresh = await read().catch(() => null);
    if (fresh && !inUse(part)) part.replaceWith(document.importNode(fresh, true));
    document.querySelector('[data-not-current]')?.toggleAttribute('hidden', fresh !== null);
  };
  const next = (): void => void setTimeout(() => void again().finally(next), EVERY_MS);
  next();
  document.addEventListener('visibilitychange', () => void again());
}
