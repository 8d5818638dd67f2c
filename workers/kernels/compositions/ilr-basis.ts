import { KernelError } from '#kernels/kernel-error.ts';

/**
 * An orthonormal basis of log-ratio space: `vectors` is row-major (nParts, nParts - 1), its columns
 * are unit vectors that sum to zero. Any basis gives the same distances.
 */
export interface IlrBasis {
  nParts: number;
  vectors: Float64Array;
}

/**
 * Pivot coordinates: z_i = sqrt((D-i)/(D-i+1)) ln(x_i / gm(x_{i+1..D})), the first part against all
 * the others first.
 *
 * @throws {KernelError} `too-few-parts` under two.
 * @see Filzmoser, Hron & Templ (2018), Applied Compositional Data Analysis, Springer.
 */
export function pivotBasis(nParts: number): IlrBasis {
  return nestedBasis(nParts, (part, i) => (part === i ? 1 : part > i ? -1 : 0));
}

/**
 * Helmert-type coordinates: z_i = sqrt(i/(i+1)) ln(gm(x_{1..i}) / x_{i+1}).
 *
 * @throws {KernelError} `too-few-parts` under two.
 * @see Egozcue et al. (2003), Isometric logratio transformations, Math. Geol. 35.
 */
export function helmertBasis(nParts: number): IlrBasis {
  return nestedBasis(nParts, (part, i) => (part <= i ? 1 : part === i + 1 ? -1 : 0));
}

/**
 * Balances of a sequential binary partition: one row of signs per balance, one sign per part
 * (+1 above, -1 below, 0 left out). b = sqrt(rs/(r+s)) ln(gm(above) / gm(below)).
 *
 * @param signs nParts - 1 rows of nParts signs.
 * @throws {KernelError} `bad-parameter` with { balance } when a row lacks one side or the rows do
 *   not nest (balances are then not orthogonal); `shape`; `too-few-parts`.
 * @see Egozcue & Pawlowsky-Glahn (2005), Groups of parts and their balances, Math. Geol. 37.
 */
export function balanceBasis(signs: readonly (readonly number[])[]): IlrBasis {
  const nParts = signs.length + 1;
  if (signs.some((row) => row.length !== nParts)) {
    throw new KernelError('shape', `expected ${nParts - 1} rows of ${nParts} signs`);
  }
  const basis = nestedBasis(nParts, (part, i) => Math.sign(signs[i]?.[part] ?? 0));
  for (let i = 0; i < nParts - 1; i++) {
    for (let j = 0; j < i; j++) {
      let product = 0;
      for (let part = 0; part < nParts; part++) product += at(basis, part, i) * at(basis, part, j);
      if (Math.abs(product) > 1e-12) {
        const message = `balances ${j} and ${i} do not nest: one must lie within one side of the other`;
        throw new KernelError('bad-parameter', message, { balance: i });
      }
    }
  }
  return basis;
}

function at({ vectors, nParts }: IlrBasis, part: number, i: number): number {
  return vectors[part * (nParts - 1) + i]!;
}

/** Unit vectors from signs: sqrt(rs/(r+s)) shared over r parts above and s parts below. */
function nestedBasis(nParts: number, signOf: (part: number, i: number) => number): IlrBasis {
  if (!(nParts >= 2) || !Number.isInteger(nParts)) {
    throw new KernelError('too-few-parts', `expected at least 2 parts, found ${nParts}`);
  }
  const vectors = new Float64Array(nParts * (nParts - 1));
  for (let i = 0; i < nParts - 1; i++) {
    const signs = Array.from({ length: nParts }, (_, part) => signOf(part, i));
    const above = signs.filter((sign) => sign > 0).length;
    const below = signs.filter((sign) => sign < 0).length;
    if (above === 0 || below === 0) {
      const message = `balance ${i} needs a part on each side, found ${above} above and ${below} below`;
      throw new KernelError('bad-parameter', message, { balance: i });
    }
    const scale = Math.sqrt((above * below) / (above + below));
    signs.forEach((sign, part) => {
      const value = sign > 0 ? scale / above : sign < 0 ? -scale / below : 0;
      vectors[part * (nParts - 1) + i] = value;
    });
  }
  return { nParts, vectors };
}
