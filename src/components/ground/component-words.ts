import type { ComponentRun } from '#contract/components.ts';
import type { Ray } from '../charts/scatter-rays.tsx';

export const componentName = (component: number): string => `PC${component}`;
export const componentNumber = (name: string): number => Number(name.replace(/^PC/, '')) || 1;

const joinWords = (words: readonly string[]): string => (words.length > 1 ? `${words.slice(0, -1).join(', ')} and ${words.at(-1)}` : (words[0] ?? 'nothing'));

/** Which elements oppose on a component, the two strongest a side: "Cd and S against Cr and Na". */
export function shortReading({ readings }: Pick<ComponentRun, 'readings'>, component: number, perSide = 2): string {
  const reading = readings.find((candidate) => candidate.component === component);
  if (reading === undefined) return 'not read';
  return `${joinWords(reading.positive.slice(0, perSide))} against ${joinWords(reading.negative.slice(0, perSide))}`;
}

const MOST_RAYS = 16;

/** Rays of the parts on two components; of many, the longest. */
export function biplotRays({ parts, loadings }: Pick<ComponentRun, 'parts' | 'loadings'>, x: number, y: number): Ray[] {
  return parts
    .map((label, index) => ({ label, x: loadings[index]?.[x - 1] ?? 0, y: loadings[index]?.[y - 1] ?? 0 }))
    .sort((a, b) => Math.hypot(b.x, b.y) - Math.hypot(a.x, a.y))
    .slice(0, MOST_RAYS);
}

/** A component of the address that the run has; else the one given. */
export function knownComponent(name: string, stored: number, fallback: number): string {
  const component = componentNumber(name);
  return /^PC\d+$/.test(name) && component <= stored ? name : componentName(Math.min(fallback, stored));
}
