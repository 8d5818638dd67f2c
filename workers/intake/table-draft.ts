import { GrowingBytes, GrowingCategory, GrowingNumbers } from './growable.ts';

/** Determinations of one analyte column while rows are read. */
export interface AssayDraft {
  unit: string;
  method: string | null;
  values: GrowingNumbers;
  qualifiers: GrowingBytes;
}

/** Columns of one table while its rows are read. All columns have `rows` entries. */
export class TableDraft {
  readonly numbers = new Map<string, GrowingNumbers>();
  readonly categories = new Map<string, GrowingCategory>();
  readonly texts = new Map<string, string[]>();
  readonly assays = new Map<string, AssayDraft>();
  /** Row of the file each draft row came from; 0 for rows already loaded before. */
  readonly sourceRow = new GrowingNumbers();

  get rows(): number {
    return this.sourceRow.length;
  }

  numberColumn(name: string): GrowingNumbers {
    return getOrMake(this.numbers, name, () => new GrowingNumbers());
  }

  categoryColumn(name: string): GrowingCategory {
    return getOrMake(this.categories, name, () => new GrowingCategory());
  }

  textColumn(name: string): string[] {
    return getOrMake(this.texts, name, () => []);
  }

  assayColumn(analyte: string, unit: string, method: string | null): AssayDraft {
    return getOrMake(this.assays, analyte, () => ({
      unit,
      method,
      values: new GrowingNumbers(),
      qualifiers: new GrowingBytes(),
    }));
  }
}

function getOrMake<Value>(map: Map<string, Value>, key: string, make: () => Value): Value {
  const found = map.get(key);
  if (found !== undefined) return found;
  const made = make();
  map.set(key, made);
  return made;
}
