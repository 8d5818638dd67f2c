/** Columns that hold the scores of the first components. */
export const componentNames = (count: number): string[] => Array.from({ length: count }, (_, i) => `PC${i + 1}`);
