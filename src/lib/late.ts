import { lazy, type ComponentType, type LazyExoticComponent } from 'react';

const TRIES = 4;
const FIRST_WAIT_MS = 400;

/**
 * A component whose code comes when it is first shown: a dialog, a sheet far down. Inside `Suspense`. Without a network it
 * is asked for again a few times before the page is told.
 */
export function late<P extends object>(
  load: () => Promise<ComponentType<P>>,
): LazyExoticComponent<ComponentType<P>> {
  return lazy(async () => {
    for (let tried = 1; ; tried++)
      try {
        return { default: await load() };
      } catch (error) {
        if (tried >= TRIES) throw error;
        await new Promise((again) => setTimeout(again, FIRST_WAIT_MS * 2 ** tried));
      }
  });
}
