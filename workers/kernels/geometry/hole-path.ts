/** Something a person should know about a hole's survey; nothing is changed silently. */
export interface SurveyNote {
  code:
    | 'first-station-copied'
    | 'duplicate-depth'
    | 'extended-straight'
    | 'dogleg'
    | 'magnetic-disturbance';
  message: string;
  depthM: number;
}

/**
 * A surveyed hole as circular arcs between stations. Vectors are east, north, elevation (m), three
 * numbers a station.
 */
export interface HolePath {
  /** Depth of each station down the hole (m), strictly ascending. */
  depthsM: Float64Array;
  /** Row-major, (nStations, 3). */
  positions: Float64Array;
  /** Unit vectors down the hole, row-major, (nStations, 3). */
  tangents: Float64Array;
  /** Angle between the tangents of a leg (radians), nStations - 1. */
  doglegsRad: Float64Array;
  /** (2 / b) tan(b / 2) of each leg, nStations - 1. */
  ratioFactors: Float64Array;
  notes: SurveyNote[];
}
