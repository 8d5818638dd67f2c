import { useCallback } from 'react';
import { useUrlState } from '#src/lib/url-state.ts';
import { TRAY_VIEW } from './url.ts';

const ROOM = 2;

/** Lays a hole in the tray, first; the tray keeps as many as its usual height shows. */
export function useLayHole(): (name: string) => void {
  const [{ holes }, setView] = useUrlState(TRAY_VIEW);
  return useCallback((name: string) => setView({ holes: [name, ...holes.filter((other) => other !== name)].slice(0, ROOM) }), [holes, setView]);
}
