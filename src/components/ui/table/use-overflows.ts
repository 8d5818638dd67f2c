import { useLayoutEffect, useState, type RefObject } from 'react';

/** True while an element holds more than it shows: it must then take focus, or the keyboard cannot scroll it. `isShown`: the element is in the page. */
export function useOverflows(ref: RefObject<HTMLElement | null>, isShown: boolean): boolean {
  const [overflows, setOverflows] = useState(false);
  useLayoutEffect(() => {
    const element = ref.current;
    if (!element || typeof ResizeObserver === 'undefined') return;
    const measure = () =>
      setOverflows(
        element.scrollWidth > element.clientWidth + 1 ||
          element.scrollHeight > element.clientHeight + 1,
      );
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    if (element.firstElementChild) observer.observe(element.firstElementChild);
    return () => observer.disconnect();
  }, [ref, isShown]);
  return overflows;
}
