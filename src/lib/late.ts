import { lazy, useEffect, type ComponentType, type LazyExoticComponent } from 'react';

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

/**
 * Brings code soon after the page is alive, for parts that a person comes to next, perhaps without a network.
 * @param loads one list for all times
 */
export function useSoon(loads: readonly (() => Promise<unknown>)[]): void {
  useEffect(() => {
    // what does not come now is asked for again where it is shown, and the fault is told there
    for (const load of loads) patiently(load).catch(() => undefined);
  }, [loads]);
}
