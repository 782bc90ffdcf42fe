import { lazy, type ComponentType, type LazyExoticComponent } from 'react';

const TRIES = 4;
const FIRST_WAIT_MS = 400;

/** Code that comes by `import()`: without a network it is asked for again a few times before the page is told. */
export async function patiently<T>(load: () => Promise<T>): Promise<T> {
  for (let tried = 1; ; tried++)
    try {
      return await load();
    } catch (error) {
      if (tried >= TRIES) throw error;
      await new Promise((again) => setTimeout(again, FIRST_WAIT_MS * 2 ** tried));
    }
}

/** A component whose code comes when it is first shown: a dialog, a form that is opened. Inside `Suspense`. */
export const late = <P extends object>(
  load: () => Promise<ComponentType<P>>,
): LazyExoticComponent<ComponentType<P>> => lazy(async () => ({ default: await patiently(load) }));
