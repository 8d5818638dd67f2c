import { useEffect, useRef } from 'react';
import { useLocation } from 'react-router-dom';

/** After going to another page focus stands at its beginning, as after a full load. */
export function useFocusOnMove() {
  const main = useRef<HTMLElement>(null);
  const { pathname } = useLocation();
  const before = useRef(pathname);
  useEffect(() => {
    if (before.current === pathname) return;
    before.current = pathname;
    main.current?.focus({ preventScroll: true });
    main.current?.scrollTo({ top: 0 });
    window.scrollTo({ top: 0 });
  }, [pathname]);
  return main;
}
