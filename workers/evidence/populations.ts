import type { PopulationPart } from '#contract/domains.ts';
import { kernelDensityEstimation } from 'simple-statistics';
import { QUALIFIER } from '#contract/tables.ts';
import { populationCell } from '#workers/frame/population-cell.ts';
import type { AssayColumn } from '#workers/frame/snapshot-tables.ts';
import type { DomainRows } from './domain-rows.ts';

/** Parts smaller than this are told in the split's table, not screened. */
const LEAST_PART = 30;
const LEAST_FOR_DENSITY = 10;
/** Enough for a curve; more values change no pixel. */
const DENSITY_VALUES = 1500;
const GRID = 96;

/** Grid of grades that all curves of one analyte share, from the smallest to the largest value of the whole. */
function gridOf({ values, qualifiers }: AssayColumn): number[] {
  const known = Array.from(values).filter((value, row) => (qualifiers[row] ?? QUALIFIER.missing) <= QUALIFIER.above && value > 0).sort((a, b) => a - b);
  const [low, high] = [Math.log(known[0] ?? 1), Math.log(known.at(-1) ?? 2)];
  return Array.from({ length: GRID }, (_, i) => low + ((high - low) * i) / (GRID - 1));
}

/** Gaussian kernel density of ln grade with the normal-reference bandwidth, scaled to height 1. */
function densityOf({ values, qualifiers }: AssayColumn, mask: Uint8Array, grid: readonly number[]): PopulationPart['density'] {
  const logs: number[] = [];
  mask.forEach((isIn, row) => {
    const value = values[row] ?? Number.NaN;
    if (isIn === 1 && (qualifiers[row] ?? QUALIFIER.missing) <= QUALIFIER.above && value > 0) logs.push(Math.log(value));
  });
  if (logs.length < LEAST_FOR_DENSITY) return null;
  const step = Math.max(1, Math.floor(logs.length / DENSITY_VALUES));
  const sorted = logs.sort((a, b) => a - b).filter((_, i) => i % step === 0);
  if (sorted[0] === sorted.at(-1)) return null;
  const density = kernelDensityEstimation(sorted, 'gaussian', 'nrd');
  const heights = grid.map((x) => density(x));
  const tallest = Math.max(...heights);
  return { ppm: grid.map(Math.exp), height: heights.map((height) => (tallest > 0 ? height / tallest : 0)) };
}

interface PartRequest {
  key: string;
  label: string;
  role: PopulationPart['role'];
  splitBy: string | null;
  mask: Uint8Array;
}

/** Whole, domain or part as one row of the picture: its screen in brief and its curve. */
function partOf(rows: DomainRows, variable: string, assay: AssayColumn, grid: readonly number[], { key, label, role, splitBy, mask }: PartRequest): PopulationPart {
  const weightsM = rows.holeStarts ? rows.lengthsM : null;
  const { verdict, n, mean, median, cv, dip, dipP, deltaBic, populations } = populationCell({ subsetKey: key, subsetLabel: label, variable, assay, weightsM, mask });
  return { subsetKey: key, variable, verdict, n, mean, median, cv, dip, dipP, deltaBic, populations, label, role, splitBy, density: densityOf(assay, mask, grid) };
}

/** One pay analyte over the whole, ready to be set beside each domain. */
export interface PayAnalyte {
  variable: string;
  assay: AssayColumn;
  grid: readonly number[];
  whole: PopulationPart;
}

export function payAnalyte(rows: DomainRows, variable: string, assay: AssayColumn): PayAnalyte {
  const grid = gridOf(assay);
  const mask = new Uint8Array(rows.lengthsM.length).fill(1);
  return { variable, assay, grid, whole: partOf(rows, variable, assay, grid, { key: 'all', label: 'all intervals', role: 'before', splitBy: null, mask }) };
}

/** A pay analyte over the whole, in the domain, and in each part of it by rock, weathering and fault side. */
export function populationParts(rows: DomainRows, mask: Uint8Array, { variable, assay, grid, whole }: PayAnalyte, code: string): PopulationPart[] {
  const parts = [whole, partOf(rows, variable, assay, grid, { key: `domain:${code}`, label: code, role: 'domain', splitBy: null, mask })];
  for (const { name, logged } of rows.categories) {
    logged.levels.forEach((level, place) => {
      const own = mask.map((isIn, row) => (isIn === 1 && logged.codes[row] === place ? 1 : 0));
      if (own.reduce((sum, isIn) => sum + isIn, 0) < LEAST_PART) return;
      parts.push(partOf(rows, variable, assay, grid, { key: `${name}:${level}`, label: level, role: 'part', splitBy: name, mask: own }));
    });
  }
  return parts;
}
