import { KernelError } from '#kernels/kernel-error.ts';
import type { Components } from './components.ts';

/** Which parts stand against each other on one component: the start of reading minerals from it. */
export interface MineralReading {
  /** Counted from 1. */
  component: number;
  /** Parts with large positive loadings, largest first. */
  positive: string[];
  /** Parts with large negative loadings, largest first. */
  negative: string[];
  sentence: string;
}

/** A part counts when its loading has at least this share of the largest on the component. */
const LARGE = 0.5;
const MOST_NAMED = 5;

/**
 * Names the parts that oppose on one component.
 *
 * @param parts Names in the order of the loadings.
 * @param component Counted from 1.
 * @throws {KernelError} `shape` when names and loadings differ in number; `bad-parameter` for the
 *   component.
 */
export function mineralReading(
  { loadings, eigenvalues, nParts }: Pick<Components, 'loadings' | 'eigenvalues' | 'nParts'>,
  parts: readonly string[],
  component: number,
): MineralReading {
  if (parts.length !== nParts) {
    throw new KernelError('shape', `expected ${nParts} names of parts, found ${parts.length}`);
  }
  if (!Number.isInteger(component) || component < 1 || component > eigenvalues.length) {
    const message = `expected a component from 1 to ${eigenvalues.length}, found ${component}`;
    throw new KernelError('bad-parameter', message);
  }
  const named = parts.map((part, i) => ({
    part,
    loading: loadings[i * eigenvalues.length + component - 1]!,
  }));
  const largest = named.reduce((most, { loading }) => Math.max(most, Math.abs(loading)), 0);
  const positive = leading(named, 1, largest);
  const negative = leading(named, -1, largest);
  const sentence = `${list(positive)} against ${list(negative)}`;
  return { component, positive, negative, sentence };
}

/** Parts of one sign by size; at least the largest of that sign, so that each side has a name. */
function leading(
  named: readonly { part: string; loading: number }[],
  sign: 1 | -1,
  largest: number,
): string[] {
  const side = named
    .filter(({ loading }) => sign * loading > 0)
    .sort((a, b) => sign * (b.loading - a.loading));
  const large = side.filter(({ loading }) => sign * loading >= LARGE * largest);
  return (large.length > 0 ? large : side.slice(0, 1)).slice(0, MOST_NAMED).map(({ part }) => part);
}

function list(parts: readonly string[]): string {
  const [last = 'nothing'] = parts.slice(-1);
  return parts.length < 2 ? last : `${parts.slice(0, -1).join(', ')} and ${last}`;
}
