import { normalCdf, normalDensity } from '#kernels/normal.ts';

/** One population of a fitted mixture, normal in the value or in its natural log. */
export interface MixtureComponent {
  label: string;
  share: number;
  /** Of the value on a linear axis, of ln(value) on a log axis. */
  mean: number;
  sd: number;
}

export function mixtureCdf(t: number, components: readonly MixtureComponent[]): number {
  return components.reduce((sum, { share, mean, sd }) => sum + share * normalCdf((t - mean) / sd), 0);
}

export function mixtureDensity(t: number, components: readonly MixtureComponent[]): number {
  return components.reduce((sum, { share, mean, sd }) => sum + (share / sd) * normalDensity((t - mean) / sd), 0);
}

/** Dash of a component's line: dashed, dotted, then longer dashes with dots. */
export function componentDash(index: number): string {
  return ['6 3', '1.5 3', '8 3 1.5 3', '3 2'][index % 4] ?? '6 3';
}
