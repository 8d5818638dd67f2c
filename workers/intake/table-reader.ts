import type { ColumnRole, FileMapping, TableKind } from '#contract/files.ts';
import { QUALIFIER } from '#contract/tables.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { readNumber } from '#kernels/units/number-text.ts';
import { ColumnLimits, readAssayCell, type AssayCell } from './assay-cells.ts';
import { planColumns, type AnalyteColumn, type ColumnPlan } from './column-plan.ts';
import { MOST_LISTED, type FoundProblem, type ProblemList } from './problem-list.ts';
import { checkRow, type CheckContext, type RowValues } from './row-checks.ts';
import type { GrowingCategory, GrowingNumbers } from './growable.ts';
import type { AssayDraft, TableDraft } from './table-draft.ts';

interface PendingCell {
  column: AnalyteColumn;
  index: number;
  row: number;
  text: string;
  /** What a negative cell would be the limit of; null for a zero or a word. */
  magnitude: number | null;
  /** The record, for a zero or a word, which is told in any case; '' otherwise. */
  original: string;
}

type Into<Column> = readonly { role: ColumnRole; column: Column }[];

interface KeptColumns {
  numbers: Into<GrowingNumbers>;
  categories: Into<GrowingCategory>;
  texts: Into<string[]>;
  assays: readonly AssayDraft[];
}

type Teller = (column: string, code: string, message: string, severity: FoundProblem['severity'], value: string) => void;

/** A million parts in a million; more is no grade. */
const WHOLE_PPM = 1e6;

export const columnName = (role: ColumnRole): string => role.replaceAll('-', ' ');

/** Determinations of one analyte in one file stay apart until the end; the first column has first say. */
export const determinationName = (column: AnalyteColumn): string => `${column.analyte} ${column.index}`;

/** Reads records into a draft, one by one, and lists what is wrong with them. */
export class TableReader implements RowValues {
  readonly plan: ColumnPlan;
  readonly limits: ColumnLimits[];
  readonly pending: PendingCell[] = [];
  readonly #kind: TableKind;
  readonly #mapping: FileMapping;
  readonly #context: CheckContext;
  readonly #draft: TableDraft;
  readonly #problems: ProblemList;
  readonly #numbers = new Map<ColumnRole, number>();
  readonly #texts = new Map<ColumnRole, string>();
  readonly #assays: AssayCell[] = [];
  readonly #headers = new Map<ColumnRole, string>();
  /** Columns in which a line end is text: in the others it is no number anyway. */
  readonly #wordy: { index: number; header: string }[];
  /** Where kept rows go, from the first one on. */
  #kept: KeptColumns | null = null;
  /** Cells of the file's own header. */
  #headerWidth = Number.POSITIVE_INFINITY;

  constructor(mapping: FileMapping, context: CheckContext, draft: TableDraft, problems: ProblemList) {
    this.plan = planColumns(mapping);
    this.limits = this.plan.analytes.map(() => new ColumnLimits());
    this.#kind = mapping.kind;
    this.#mapping = mapping;
    this.#context = context;
    this.#draft = draft;
    this.#problems = problems;
    for (const { role, header } of mapping.columns) if (!this.#headers.has(role)) this.#headers.set(role, header);
    const parsed = new Set([...this.plan.numbers, ...this.plan.analytes].map(({ index }) => index));
    this.#wordy = mapping.columns.filter(({ index }) => !parsed.has(index));
  }

  /**
   * Takes row 1, which names the columns.
   *
   * @throws {KernelError} `bad-mapping` at the first column the mapping reads under another name.
   */
  readHeader(cells: readonly string[]): void {
    this.#headerWidth = cells.length;
    for (const { index, header, role } of this.#mapping.columns) {
      if (role === 'skip' || cells[index]?.trim() === header.trim()) continue;
      const cell = cells[index];
      const found = cell === undefined ? `${cells.length} ${cells.length === 1 ? 'column' : 'columns'} only` : `“${cell.trim()}”`;
      throw new KernelError('bad-mapping', `row 1: expected “${header.trim()}” as column ${index + 1}, found ${found}`, { index });
    }
  }

  number(role: ColumnRole): number {
    return this.#numbers.get(role) ?? Number.NaN;
  }

  text(role: ColumnRole): string {
    return this.#texts.get(role) ?? '';
  }

  has(role: ColumnRole): boolean {
    return this.#numbers.has(role) || this.#texts.has(role);
  }

  /** Name of the column a role is read from. */
  headerOf(role: ColumnRole): string {
    return this.#headers.get(role) ?? role;
  }

  /** Takes one record; blank ones are passed over. Answers whether it was kept. */
  read(row: number, cells: readonly string[]): boolean {
    if (cells.length === 1 && cells[0]?.trim() === '') return false;
    const tell = this.#teller(row, cells);
    if (cells.length < this.plan.width) {
      tell('', 'row-short', `expected at least ${this.plan.width} cells, found ${cells.length}`, 'aside', '');
      return false;
    }
    if (cells.length > this.#headerWidth && cells.slice(this.#headerWidth).some((cell) => cell.trim() !== '')) {
      tell('', 'row-long', `expected at most ${this.#headerWidth} cells, found ${cells.length}`, 'aside', '');
      return false;
    }
    for (const { index, header } of this.#wordy) this.#tellLines(cells[index] ?? '', header, tell);
    const isReadable = [this.#readPlain(cells, tell), this.#readAssays(cells, tell)].every(Boolean);
    const findings = isReadable ? checkRow(this.#kind, this, this.#context) : [];
    for (const { role, code, message, severity } of findings) {
      tell(this.headerOf(role), code, message, severity, this.#written(role));
    }
    if (!isReadable || findings.some(({ severity }) => severity === 'aside')) return false;
    this.#keep(row, cells);
    return true;
  }

  /** A quotation mark left open takes in the rows up to the next one: that is told, never passed over. */
  #tellLines(cell: string, header: string, tell: Teller): void {
    if (!cell.includes('\n')) return;
    const lines = cell.split('\n').length;
    tell(header, 'cell-spans-lines', `expected a cell on one line, found ${lines} lines; is a quotation mark not closed?`, 'warning', cell.slice(0, 200));
  }

  #written(role: ColumnRole): string {
    const value = this.#texts.get(role) ?? this.#numbers.get(role);
    return value === undefined || Number.isNaN(value) ? '' : String(value);
  }

  #teller(row: number, cells: readonly string[]): Teller {
    return (column, code, message, severity, value) =>
      this.#problems.add({ row, column, code, message, severity, value, original: cells.join(this.#mapping.delimiter) });
  }

  #readPlain(cells: readonly string[], tell: Teller): boolean {
    let isReadable = true;
    for (const { index, role } of this.plan.categories) this.#texts.set(role, (cells[index] ?? '').trim());
    for (const { index, role } of this.plan.texts) this.#texts.set(role, (cells[index] ?? '').trim());
    for (const { index, role, header } of this.plan.numbers) {
      const text = (cells[index] ?? '').trim();
      const value = text === '' ? Number.NaN : readNumber(text, this.#mapping.decimalMark);
      if (value === null) {
        tell(header, 'not-a-number', `expected a number for ${columnName(role)}, found “${text}”`, 'aside', text);
        isReadable = false;
      }
      this.#numbers.set(role, this.#signed(role, value ?? Number.NaN));
    }
    return isReadable;
  }

  /** Dips are kept negative when they point down, whatever sign the file uses. */
  #signed(role: ColumnRole, value: number): number {
    const isSurveyDip = role === 'dip' && this.#kind === 'survey';
    return isSurveyDip && this.#mapping.downIs === 'positive' ? -value : value;
  }

  #readAssays(cells: readonly string[], tell: Teller): boolean {
    let isReadable = true;
    this.plan.analytes.forEach(({ index, header, unit, toPpm }, place) => {
      const text = (cells[index] ?? '').trim();
      const cell = readAssayCell(text, this.#mapping.decimalMark);
      this.#assays[place] = cell;
      if (cell.kind === 'refused') tell(header, 'not-a-number', cell.message, 'aside', text);
      else if (cell.kind === 'told' && cell.value * toPpm > WHOLE_PPM) tell(header, 'over-the-whole', `${text} ${unit} is more than the whole sample; is the unit right?`, 'aside', text);
      else return;
      isReadable = false;
    });
    return isReadable;
  }

  #keep(row: number, cells: readonly string[]): void {
    const draft = this.#draft;
    const kept = (this.#kept ??= this.#keptColumns());
    for (const { role, column } of kept.numbers) column.push(this.number(role));
    for (const { role, column } of kept.categories) column.push(this.text(role));
    for (const { role, column } of kept.texts) column.push(this.text(role));
    let original = '';
    for (let place = 0; place < kept.assays.length; place++) {
      const cell = this.#assays[place];
      const column = this.plan.analytes[place];
      const assay = kept.assays[place];
      if (!cell || !column || !assay || cell.kind === 'refused') continue;
      this.limits[place]?.see(cell);
      const isTold = cell.kind === 'told';
      assay.values.push(isTold ? cell.value * column.toPpm : Number.NaN);
      assay.qualifiers.push(isTold ? cell.qualifier : QUALIFIER.missing);
      if (isTold) continue;
      const isTellable = cell.magnitude === null && this.pending.length < MOST_LISTED;
      if (isTellable && original === '') original = cells.join(this.#mapping.delimiter);
      this.pending.push({
        column, index: draft.rows, row, text: cells[column.index] ?? '', magnitude: cell.magnitude, original: isTellable ? original : '',
      });
    }
    draft.sourceRow.push(row);
  }

  /** The draft's columns in the order of the plan, looked up once: tables have millions of cells. */
  #keptColumns(): KeptColumns {
    const draft = this.#draft;
    const { numbers, categories, texts, analytes } = this.plan;
    return {
      numbers: numbers.map(({ role }) => ({ role, column: draft.numberColumn(columnName(role)) })),
      categories: categories.map(({ role }) => ({ role, column: draft.categoryColumn(columnName(role)) })),
      texts: texts.map(({ role }) => ({ role, column: draft.textColumn(columnName(role)) })),
      assays: analytes.map((column) => draft.assayColumn(determinationName(column), column.unit, column.method)),
    };
  }
}
