/** A logged rock, down one hole. */
export interface RockInterval {
  fromM: number;
  toM: number;
  code: string;
}

/** A structure reading: its angle to the core axis, and whether it is sure. */
export interface CoreStructure {
  depthM: number;
  /** 0 to 90; 45 is drawn where it was not measured. */
  alphaDeg: number | null;
  sure: boolean;
}

/** An assayed interval with all that is known of it. */
export interface CoreInterval {
  /** Row in the frame: the same number in every plot. */
  row: number;
  fromM: number;
  toM: number;
  groupSlot: number | null;
  /** 0 to 1. */
  membership: number | null;
  grade: number | null;
  domain: { code: string; slot: number | null } | null;
  /** Host rock: the domain is drawn as an outline only. */
  isHost?: boolean;
  /** Coded by hand: a notch marks it. */
  isHandSet?: boolean;
}

export interface DepthInterval {
  fromM: number;
  toM: number;
}

/** Metres to pixels along a strip. */
export type Along = (depthM: number) => number;
