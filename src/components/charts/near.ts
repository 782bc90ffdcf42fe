import { useEffect, useState } from 'react';

/** True once the element is within a screen's height of the window. */
export function useNear(ref: { current: HTMLElement | null }): boolean {
  const [near, setNear] = useState(false);
  useEffect(() => {
    const element = ref.current;
    if (!element || near) return;
    const watch = new IntersectionObserver(
      (entries) => entries.some((e) => e.isIntersecting) && setNear(true),
      {
        rootMargin: '100% 0px',
      },
    );
    watch.observe(element);
    return () => watch.disconnect();
  }, [ref, near]);
  return near;
}

/** Width of the element, px, in steps that matter to a layout. */
export function useWidth(ref: { current: HTMLElement | null }): number {
  const [width, setWidth] = useState(0);
  useEffect(() => {
    const element = ref.current;
    if (!element) return;
    const watch = new ResizeObserver(() => setWidth(Math.round(element.clientWidth / 20) * 20));
    watch.observe(element);
    return () => watch.disconnect();
  }, [ref]);
  return width;
}
