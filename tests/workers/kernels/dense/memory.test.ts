import { execFileSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';

/** Most the process grew by while a kernel ran, in sizes of its matrix, results included. */
const growthOf = (kernel: string): number =>
  Number(execFileSync(process.execPath, ['--import', 'tsx', 'tests/support/memory-growth.ts', kernel], { encoding: 'utf8' }));

describe('large tables are copied no more than twice', () => {
  it.each([
    // Eight scores of forty columns are a fifth of the matrix; the table itself is never copied.
    ['components', 0.5],
    ['k-means', 2],
    // Two copies, with responsibilities and own shares of half a matrix beside them.
    ['mixture', 3],
  ])('%s', (kernel, most) => {
    const growth = growthOf(kernel);
    expect(growth).toBeGreaterThan(0.1);
    expect(growth).toBeLessThan(most);
  });
});
