import { TRACKS } from './tray-types.ts';
import type { TrackName } from './tray-types.ts';

const HEIGHTS: Record<TrackName, number> = { structure: 12, rock: 13, group: 17, grade: 13, domain: 12 };
const GAP_PX = 2;
const PAD_PX = 1.5;

/** Room at the left for the hole and the names of tracks, and before the right edge for "end". */
export const LABELS_PX = 132;
export const END_PX = 34;
/** Troughs stand this far apart. */
export const TROUGH_GAP_PX = 8;

export interface TroughLayout {
  height: number;
  tracks: { name: TrackName; top: number; height: number }[];
}

/** Tracks from the top down with their places; 78 px for all five. */
export function troughLayout(shown: ReadonlySet<TrackName>): TroughLayout {
  const tracks: TroughLayout['tracks'] = [];
  let top = PAD_PX;
  for (const name of TRACKS) {
    if (!shown.has(name)) continue;
    tracks.push({ name, top, height: HEIGHTS[name] });
    top += HEIGHTS[name] + GAP_PX;
  }
  return { height: Math.max(24, top - GAP_PX + PAD_PX), tracks };
}
