import { createElement, useState, type ComponentType, type ReactElement } from 'react';

declare const of: unique symbol;
/** What an island begins with, as one text. */
export type Packed<P> = string & { readonly [of]?: P };

/** Astro writes every number and word of a prop by itself: for thousands of them that is dearer than drawing the page. */
export const packed = <P extends object>(props: P): Packed<P> => JSON.stringify(props);

/** The island of a part whose props come in one text. JSON: instants as text, nothing undefined. */
export const unpacking = <P extends object>(
  Part: ComponentType<P>,
): ((props: { packed: Packed<P> }) => ReactElement) =>
  function Unpacking({ packed: text }) {
    const [props] = useState(() => JSON.parse(text) as P);
    return createElement(Part, props);
  };
