import { type RefObject, useLayoutEffect, useState } from 'react';

/** Before the place has been measured, and where nothing can be (tests). */
const USUAL_WIDTH = 324;

/** Width of an element in whole px, told again whenever it changes. */
export function useWidth(ref: RefObject<HTMLElement | null>): number {
  const [width, setWidth] = useState(USUAL_WIDTH);
  useLayoutEffect(() => {
    const element = ref.current;
    if (!element || typeof ResizeObserver === 'undefined') return;
    const measure = () => setWidth(Math.floor(element.clientWidth) || USUAL_WIDTH);
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => observer.disconnect();
  }, [ref]);
  return width;
}
