import { parse } from 'csv-parse/sync';
import type { DemoDeposit } from '#seeds/demo/demo-deposit.ts';

/** One CSV of the deposit: header and rows, read by the same library that reads uploads. */
export function readFile(
  deposit: DemoDeposit,
  fileName: string,
): { header: string[]; rows: string[][] } {
  const file = deposit.files.find((one) => one.fileName === fileName);
  if (!file) throw new Error(`expected a file ${fileName}, found none`);
  const [header = [], ...rows] = parse(file.csv);
  return { header, rows };
}

export interface AssayRow {
  hole: string;
  fromM: number;
  toM: number;
  campaign: 1 | 2;
  line: number;
  /** Cell text by analyte of the routine column, and `Cu OG` for the ore-grade column. */
  text: Map<string, string>;
  /** ppm by analyte: ore-grade method first, 0.65 of the limit below it. Empty when not sampled. */
  ppm: Map<string, number>;
}

function readCell(text: string, perUnit: number): number | null {
  if (text === '' || text === 'NS') return null;
  const below = text.startsWith('<') || text.startsWith('-');
  const value = Number(text.replace(/^[<>-]/, ''));
  return value * perUnit * (below ? 0.65 : 1);
}

/** Both assay files, joined into one list of rows in file order. */
export function readAssays(deposit: DemoDeposit): AssayRow[] {
  return ([1, 2] as const).flatMap((campaign) => {
    const { header, rows } = readFile(deposit, `assays_campaign_${campaign}.csv`);
    return rows.map((cells, i) => {
      const text = new Map<string, string>();
      const ppm = new Map<string, number>();
      header.slice(4).forEach((heading, j) => {
        const [, analyte = ''] = /^([A-Z][a-z]?)[_ ]/.exec(heading) ?? [];
        const cell = cells[j + 4] ?? '';
        text.set(heading.includes('OG') ? `${analyte} OG` : analyte, cell);
        const value = readCell(cell, /pct|%/.test(heading) ? 1e4 : 1);
        if (value !== null) ppm.set(analyte, value);
      });
      const [hole = '', from, to] = cells;
      return { hole, fromM: Number(from), toM: Number(to), campaign, line: i + 2, text, ppm };
    });
  });
}

export const median = (values: readonly number[]): number => {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] ?? NaN;
};
