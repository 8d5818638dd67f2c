/** Cells [1, 2) is divided into for logarithms. */
export const LOG_CELLS = 1024;

/** For each cell 1 / c and ln c, side by side, with c its middle. */
export const LOG_TABLE = Float64Array.from({ length: 2 * LOG_CELLS }, (_, i) => {
  const inverse = 1 / (1 + ((i >> 1) + 0.5) / LOG_CELLS);
  return i % 2 === 0 ? inverse : -Math.log(inverse);
});

/** Steps of an octave for exponentials. */
export const EXP_STEPS = 64;

/** 2^(-i/64). */
export const EXP_TABLE = Float64Array.from({ length: EXP_STEPS }, (_, i) => 2 ** (-i / EXP_STEPS));
