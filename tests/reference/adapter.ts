import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import type { ReferenceResult } from './compare.ts';

/** Computes, from the kernels alone, what a check of one function expects, in the layout of its value. */
export type Adapter = (set: ReferenceSet, check: ReferenceCheck) => ReferenceResult;

/** Adapters of one group by function name. */
export type Adapters = Readonly<Record<string, Adapter>>;

/** A number of the inputs of a check. */
export function inputNumber(check: ReferenceCheck, name: string): number {
  const value = check.inputs[name];
  if (typeof value !== 'number' || !Number.isFinite(value))
    throw new Error(`${check.id}: expected a number as input ${name}, found ${String(value)}`);
  return value;
}

/** A text of the inputs of a check, such as the name of a column. */
export function inputText(check: ReferenceCheck, name: string): string {
  const value = check.inputs[name];
  if (typeof value !== 'string')
    throw new Error(`${check.id}: expected a text as input ${name}, found ${String(value)}`);
  return value;
}

/** Keeps what `make` gives for a key, so that checks of one fit share it. */
export function remembered<T>(): (key: string, make: () => T) => T {
  const known = new Map<string, T>();
  return (key, make) => {
    const found = known.get(key);
    if (found !== undefined) return found;
    const made = make();
    known.set(key, made);
    return made;
  };
}

/** What the rows and columns of a check depend on, as a key. */
export function dataKey(set: ReferenceSet, { inputs }: ReferenceCheck): string {
  const { column, columns, filter, transform, components } = inputs;
  return JSON.stringify([set.file, column, columns, filter, transform, components]);
}
