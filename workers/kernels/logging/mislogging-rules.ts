/** Limits of the search for suspected mislogging (project rule). */
export const MISLOGGING_RULES = {
  /** A class needs as many rows in as many holes. */
  rows: 20,
  holes: 3,
  /** Below this probability the logged code is denied, above that another is meant. */
  logged: 0.05,
  other: 0.8,
  /** Successive composites. */
  run: 2,
  /** Below this kappa codes are not chemical units and nothing is flagged. */
  kappa: 0.4,
} as const;
