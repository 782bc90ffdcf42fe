import type { Locator } from 'playwright-core';

/**
 * Does with the keyboard what a pointer would do to a control: from the one before it, Tab must lead to it, the focus
 * must be seen there, and Enter (or Space, where that is the key) must work it; a box that is ticked stays so. A control that a pointer alone reaches
 * fails here.
 */
export async function press(target: Locator, key?: 'Enter' | ' '): Promise<void> {
  const page = target.page();
  await target.waitFor({ state: 'attached' });
  await page.waitForFunction((e) => !e?.matches(':disabled'), await target.elementHandle());
  await target.scrollIntoViewIfNeeded();
  const from = await target.evaluate((element) => {
    if (element === document.activeElement) return 'itself';
    const modal = [...document.querySelectorAll('dialog:modal')].at(-1);
    const stops = [
      ...(modal ?? document).querySelectorAll<HTMLElement>(
        'a[href], button, input, select, textarea, summary, [tabindex], [contenteditable="true"]',
      ),
    ].filter(
      (e) =>
        e === element ||
        (e.tabIndex >= 0 &&
          !e.matches(':disabled') &&
          !e.closest('[inert]') &&
          e.checkVisibility({ visibilityProperty: true }) &&
          // of a group of radio buttons one is a stop
          !(e instanceof HTMLInputElement && e.type === 'radio' && !e.checked)),
    );
    const before = stops[stops.indexOf(element as HTMLElement) - 1];
    (before ?? (document.activeElement as HTMLElement | null))?.blur();
    before?.focus({ preventScroll: true });
    return before ? 'the one before' : 'the beginning';
  });
  if (from !== 'itself') {
    // a date or a time is gone through part by part before Tab leads on
    for (let parts = 0; parts < 6; parts++) {
      await page.keyboard.press('Tab');
      const still = await page.evaluate(() => {
        const e = document.activeElement;
        return e instanceof HTMLInputElement && /^(date|time|month|week|datetime-local)$/.test(e.type);
      });
      if (!still) break;
    }
    const radio = await target.evaluate((e) => e instanceof HTMLInputElement && e.type === 'radio');
    // arrows choose within a group; where the group is, Tab has led to
    if (radio) await target.focus();
  }
  const there = await target.evaluate((element) => {
    if (element !== document.activeElement)
      return `Tab does not lead to it but to ${document.activeElement?.outerHTML.slice(0, 200)}`;
    // an input that is not drawn shows its focus on what stands for it
    for (let e: Element | null = element, up = 0; e && up < 3; e = e.parentElement, up++)
      for (const drawn of [e, ...(up > 0 ? e.children : [])]) {
        const { outlineStyle, boxShadow } = getComputedStyle(drawn);
        if (outlineStyle !== 'none' || boxShadow !== 'none') return '';
      }
    return 'its focus is not seen';
  });
  if (there) throw new Error(`${target.toString()}: ${there}`);
  const box = await target.evaluate((e) =>
    e instanceof HTMLInputElement && ['checkbox', 'radio'].includes(e.type) ? { checked: e.checked } : null,
  );
  if (box?.checked) return;
  await page.keyboard.press(key ?? (box ? ' ' : 'Enter'));
}
