/** Holes known from the current collars: how long each is, and what a misspelt name may have meant. */
export interface KnownHoles {
  lengthOf(hole: string): number | undefined;
  suggestionFor(hole: string): string | null;
}

/** Letters and figures that are taken for each other by eye, and separators, made alike. */
const normalise = (hole: string): string =>
  hole.toUpperCase().replaceAll(/[\s._/-]+/g, '').replaceAll('O', '0').replaceAll(/[IL]/g, '1').replaceAll('S', '5').replaceAll('B', '8');

export function knownHoles(names: readonly string[], lengths: ArrayLike<number>): KnownHoles {
  const lengthByName = new Map(names.map((name, i) => [name, lengths[i] ?? Number.NaN]));
  const byShape = new Map<string, string | null>();
  for (const name of names) {
    const shape = normalise(name);
    byShape.set(shape, byShape.has(shape) ? null : name);
  }
  return {
    lengthOf: (hole) => lengthByName.get(hole),
    suggestionFor: (hole) => byShape.get(normalise(hole)) ?? null,
  };
}
