import { createElement, useEffect, useState, type ComponentType, type ReactElement } from 'react';
import { patiently } from './late';

/** One object for all: React leaves what stands there alone as long as it is the same. */
const AS_IT_CAME = { __html: '' };

/**
 * A part of a page that is not needed at first look. The server renders it with the page; its code comes once the page is
 * alive, and until then stands what the server sent: nothing moves, whatever changes meanwhile. It shall have no state that
 * a person could have changed by then.
 * @param load brings the code
 * @param atServer the part itself, on the server: `import.meta.env.SSR ? Part : null`
 */
export function later<P extends object>(
  load: () => Promise<ComponentType<P>>,
  atServer: ComponentType<P> | null,
): (props: P & { className?: string }) => ReactElement {
  let loaded = atServer;
  return function Later({ className, ...props }) {
    const [Part, setPart] = useState(() => loaded);
    useEffect(() => {
      if (Part) return;
      let gone = false;
      patiently(load).then(
        (part) => {
          loaded = part;
          if (!gone) setPart(() => part);
        },
        (error: unknown) => {
          if (!gone)
            setPart(() => {
              throw error;
            });
        },
      );
      return () => {
        gone = true;
      };
    }, [Part]);
    return createElement(
      'div',
      Part
        ? { className, 'data-later': '' }
        : {
            className,
            'data-later': '',
            suppressHydrationWarning: true,
            dangerouslySetInnerHTML: AS_IT_CAME,
          },
      Part && createElement(Part, props as P),
    );
  };
}
