import { describe, expect, it } from 'vitest';
import { readNumbers } from '#src/lib/columns.ts';

const answer = (bytes: ArrayBuffer, dtype: string) =>
  new Response(bytes, { headers: { 'X-Dtype': dtype } });

describe('readNumbers', () => {
  it('reads little-endian float64 with NaN', async () => {
    const bytes = new ArrayBuffer(24);
    const view = new DataView(bytes);
    [1.5, Number.NaN, -2e-7].forEach((value, index) => view.setFloat64(index * 8, value, true));
    expect([...(await readNumbers(answer(bytes, 'float64'), 'x'))]).toEqual([
      1.5,
      Number.NaN,
      -2e-7,
    ]);
  });

  it('reads bytes as numbers', async () => {
    expect([...(await readNumbers(answer(Uint8Array.of(0, 3, 4).buffer, 'uint8'), 'x'))]).toEqual([
      0, 3, 4,
    ]);
  });

  it.each([
    ['float64', 12],
    ['complex', 16],
  ])('refuses %s in %i bytes', async (dtype, length) => {
    await expect(readNumbers(answer(new ArrayBuffer(length), dtype), 'column PC1')).rejects.toThrow(
      /column PC1.*found \d+ bytes/,
    );
  });
});
