/** A count as sentences of the server write it: 10,598. */
export const inFigures = (count: number): string => count.toLocaleString('en-GB');
