import { useCallback, useState } from 'react';
import type { Box } from './chart-types.ts';

function sameBox(a: Box, b: Box): boolean {
  return a.width === b.width && a.height === b.height;
}

/** A callback ref and the size of the element it is put on. */
export type MeasuredBox = readonly [(node: HTMLElement | null) => (() => void) | undefined, Box];

/**
 * Measures an element and follows its size, in whole pixels. Returns a callback ref and the box;
 * until the element has a size the fallback is used, so a chart can draw in a page without layout.
 */
export function useBox(fallback: Box): MeasuredBox {
  const [box, setBox] = useState(fallback);
  const ref = useCallback((node: HTMLElement | null) => {
    if (node === null) return undefined;
    const measure = () => {
      const next = { width: Math.floor(node.clientWidth), height: Math.floor(node.clientHeight) };
      if (next.width > 0 && next.height > 0) setBox((now) => (sameBox(now, next) ? now : next));
    };
    measure();
    if (typeof ResizeObserver === 'undefined') return undefined;
    const observer = new ResizeObserver(measure);
    observer.observe(node);
    return () => observer.disconnect();
  }, []);
  return [ref, box];
}
