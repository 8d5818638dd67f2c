import type { CoreInterval, CoreStructure, RockInterval } from '../charts/core-types.ts';

/** A hole laid in the tray. */
export interface TrayHole {
  name: string;
  lengthM: number;
  /** Depth set against zero of the ruler where holes hang from a contact; 0 when absent. */
  originM?: number;
  rock: readonly RockInterval[];
  structures: readonly CoreStructure[];
  /** Down the hole, without overlaps. */
  intervals: readonly CoreInterval[];
}

export const TRACKS = ['structure', 'rock', 'group', 'grade', 'domain'] as const;
export type TrackName = (typeof TRACKS)[number];
export const ALL_TRACKS: ReadonlySet<TrackName> = new Set(TRACKS);

/** Where the menu of an interval should open, in pixels of the page. */
export interface MenuPlace {
  x: number;
  y: number;
}

/** Analytes the grade track can show. */
export interface GradeChoices {
  names: readonly string[];
  chosen: string;
  onChoose: (name: string) => void;
}
