/** First row of each hole, then the number of rows; rows are sorted by hole. */
export function holeStartsOf(holeCodes: Float64Array): Int32Array {
  const starts: number[] = [];
  for (let row = 0; row < holeCodes.length; row++) if (row === 0 || !Object.is(holeCodes[row], holeCodes[row - 1])) starts.push(row);
  return Int32Array.from([...starts, holeCodes.length]);
}
