import { type FileMapping, type PreviewRow } from '#contract/files.ts';
import { QUALIFIER } from '#contract/tables.ts';
import { Cancelled } from '#workers/task-types.ts';
import { readAssayCell } from './assay-cells.ts';
import { eachRow } from './csv-rows.ts';
import { knownHoles } from './hole-names.ts';
import { ProblemList } from './problem-list.ts';
import { TableDraft } from './table-draft.ts';
import { TableReader } from './table-reader.ts';
import type { TextEncoding } from './text-encoding.ts';

const MARK_BY_QUALIFIER = { [QUALIFIER.measured]: 'plain', [QUALIFIER.below]: 'below', [QUALIFIER.above]: 'above' } as const;

export interface PreviewInput {
  path: string;
  encoding: TextEncoding;
  mapping: FileMapping;
  rows: number;
  collarNames: string[] | null;
  collarLengths: number[];
}

function markOf(text: string, decimalMark: '.' | ',') {
  const cell = readAssayCell(text, decimalMark);
  if (cell.kind === 'refused') return 'refused' as const;
  if (cell.kind === 'pending') return 'below' as const;
  if (cell.qualifier === QUALIFIER.missing || cell.qualifier === QUALIFIER.notAnalysed) return text === '' ? 'plain' as const : 'missing' as const;
  return cell.qualifier === QUALIFIER.below || cell.qualifier === QUALIFIER.above ? MARK_BY_QUALIFIER[cell.qualifier] : 'plain';
}

/** Reads the first rows with a mapping and marks each cell as it will be understood. */
export async function previewFile({ path, encoding, mapping, rows, collarNames, collarLengths }: PreviewInput): Promise<PreviewRow[]> {
  const problems = new ProblemList();
  const holes = collarNames === null ? null : knownHoles(collarNames, collarLengths);
  const reader = new TableReader(mapping, { holes }, new TableDraft(), problems);
  const shown = mapping.columns.filter(({ role }) => role !== 'skip');
  const preview: PreviewRow[] = [];
  try {
    await eachRow({ path, delimiter: mapping.delimiter, encoding }, (row, cells) => {
      if (row === 1) return reader.readHeader(cells);
      if (cells.length === 1 && cells[0]?.trim() === '') return;
      if (preview.length >= rows) throw new Cancelled();
      const before = problems.listed.length;
      const kept = reader.read(row, cells);
      const found = problems.listed.slice(before);
      preview.push({
        row,
        aside: !kept,
        cells: shown.map(({ index, header, role }) => {
          const text = (cells[index] ?? '').trim();
          const problem = found.find(({ column }) => column === header);
          if (problem) return { text, mark: problem.severity === 'aside' ? 'refused' as const : 'plain' as const, note: problem.message };
          return { text, mark: role === 'analyte' ? markOf(text, mapping.decimalMark) : 'plain' as const, note: null };
        }),
      });
    });
  } catch (error) {
    // Enough rows seen: the reader was stopped on purpose.
    if (!(error instanceof Cancelled)) throw error;
  }
  return preview;
}
