/** One row of the table of what the mixing verdict finds on generated truth, % of runs. */
export interface VerdictPowerRow {
  truth: string;
  /** Called mixed, and called mixed or suspect, at n = 60, 300, 1,000 and 5,000. */
  mixed: readonly [number, number, number, number];
  flagged: readonly [number, number, number, number];
}

/** Numbers of rows of the columns of `VERDICT_POWER`. */
export const VERDICT_POWER_ROWS = [60, 300, 1000, 5000] as const;

/**
 * What the mixing verdict finds and what it raises falsely: 20 generated data sets per cell (so each
 * figure is good to about 10), made by tests/bench/verdict-power.ts. Mixtures are two lognormal
 * populations of equal spread, the separation in standard deviations of ln grade (Ashman D), the share
 * that of the upper one. A true share of 5 % sits on the limit of 5 %: about half of the runs fall on
 * either side of it and are called mixed or suspect accordingly.
 */
export const VERDICT_POWER: readonly VerdictPowerRow[] = [
  { truth: 'separation 2, share 10 %', mixed: [0, 0, 0, 0], flagged: [0, 0, 5, 0] },
  { truth: 'separation 2, share 30 %', mixed: [0, 0, 5, 0], flagged: [5, 0, 40, 60] },
  { truth: 'separation 2.5, share 10 %', mixed: [0, 0, 0, 0], flagged: [0, 10, 40, 50] },
  { truth: 'separation 2.5, share 30 %', mixed: [0, 5, 90, 100], flagged: [5, 30, 100, 100] },
  { truth: 'separation 3, share 5 %', mixed: [0, 0, 5, 0], flagged: [5, 20, 75, 95] },
  { truth: 'separation 3, share 10 %', mixed: [0, 10, 45, 85], flagged: [5, 55, 100, 100] },
  { truth: 'separation 3, share 30 %', mixed: [0, 60, 100, 100], flagged: [10, 85, 100, 100] },
  { truth: 'separation 3, share 50 %', mixed: [5, 65, 100, 100], flagged: [5, 85, 100, 100] },
  { truth: 'separation 4, share 5 %', mixed: [0, 15, 55, 55], flagged: [15, 80, 100, 100] },
  { truth: 'separation 4, share 10 %', mixed: [5, 65, 100, 100], flagged: [40, 95, 100, 100] },
  { truth: 'separation 4, share 30 %', mixed: [10, 100, 100, 100], flagged: [45, 100, 100, 100] },
  { truth: 'separation 5, share 10 %', mixed: [30, 100, 100, 100], flagged: [95, 100, 100, 100] },
  { truth: 'separation 5, share 30 %', mixed: [70, 100, 100, 100], flagged: [100, 100, 100, 100] },
  { truth: 'one lognormal', mixed: [0, 0, 0, 0], flagged: [0, 0, 0, 0] },
  { truth: 'one exponential grade', mixed: [0, 0, 0, 0], flagged: [5, 0, 0, 0] },
  { truth: 'one gamma grade, shape .5', mixed: [0, 0, 0, 0], flagged: [15, 5, 0, 5] },
  { truth: 'one normal grade, CV .3', mixed: [0, 0, 0, 0], flagged: [0, 5, 0, 0] },
  { truth: 'one heavy-tailed population', mixed: [0, 0, 0, 0], flagged: [0, 0, 0, 0] },
  { truth: 'one lognormal cut off at its median', mixed: [0, 0, 0, 0], flagged: [5, 0, 0, 0] },
  { truth: 'grades spread evenly in ln', mixed: [0, 0, 0, 0], flagged: [15, 0, 0, 0] },
  { truth: 'one lognormal rounded to a few steps', mixed: [0, 0, 0, 0], flagged: [0, 0, 0, 0] },
];

/** Two lines of help for the verdict, its caution, and its sources. */
export const VERDICT_HELP = {
  runs: 20,
  text: 'Mixed: several lognormal populations beat every single one tried by BIC and stand apart, each with 5 % or more. Suspect: one kind of evidence only.',
  caution:
    'Rows down a hole are not independent, so the figures are nominal; with 60 rows only populations five standard deviations apart are found. A split needs a geological reason.',
  source:
    'Schwarz (1978) for BIC; Hartigan & Hartigan (1985) for the dip; Ashman, Bird & Zepf (1994) for D; Box & Cox (1964) for the skewed alternative; the thresholds are this project’s own.',
} as const;
