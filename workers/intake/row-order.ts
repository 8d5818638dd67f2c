import type { TableKind } from '#contract/files.ts';
import type { TableDraft } from './table-draft.ts';

export interface OrderFinding {
  index: number;
  column: 'hole' | 'from' | 'depth' | 'name';
  code: string;
  message: string;
}

const ROUNDING_M = 0.005;

/** Draft rows sorted by hole name (code point order), then by depth, then as they came. */
export function sortedRows(draft: TableDraft): Int32Array {
  const order = Int32Array.from({ length: draft.rows }, (_, i) => i);
  const hole = draft.categories.get('hole') ?? draft.categories.get('name');
  if (!hole) return order;
  const rank = ranksOf(hole.texts());
  const codes = hole.codes.view();
  const depth = (draft.numbers.get('from') ?? draft.numbers.get('depth'))?.view();
  return order.sort((a, b) => {
    const byHole = (rank[codes[a] ?? 0] ?? 0) - (rank[codes[b] ?? 0] ?? 0);
    if (byHole !== 0 || !depth) return byHole || a - b;
    return (depth[a] ?? 0) - (depth[b] ?? 0) || a - b;
  });
}

function ranksOf(texts: readonly string[]): number[] {
  const ranks: number[] = [];
  const places = texts.map((_, place) => place).sort((a, b) => compareCodePoints(texts[a] ?? '', texts[b] ?? ''));
  places.forEach((place, rank) => (ranks[place] = rank));
  return ranks;
}

export const compareCodePoints = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0);

const placeOf = (draft: TableDraft, index: number): string => {
  const row = draft.sourceRow.at(index);
  return row === 0 ? 'a row already loaded' : `row ${row}`;
};

/** Of two rows in conflict the one that came later gives way; rows already loaded came first. */
export function conflictingRows(kind: TableKind, draft: TableDraft): OrderFinding[] {
  if (kind === 'assay' || kind === 'lithology' || kind === 'weathering') return overlaps(draft);
  if (kind === 'collar' || kind === 'fault') return repeats(draft, kind === 'collar' ? 'hole' : 'name', null);
  return kind === 'survey' ? repeats(draft, 'hole', 'depth') : [];
}

function overlaps(draft: TableDraft): OrderFinding[] {
  const findings: OrderFinding[] = [];
  const hole = draft.categoryColumn('hole').codes;
  const from = draft.numberColumn('from');
  const to = draft.numberColumn('to');
  let kept = -1;
  for (const index of sortedRows(draft)) {
    const isSameHole = kept >= 0 && hole.at(index) === hole.at(kept);
    const shared = isSameHole ? Math.min(to.at(index), to.at(kept)) - from.at(index) : 0;
    if (shared <= ROUNDING_M) {
      kept = index;
      continue;
    }
    const [loser, winner] = index > kept ? [index, kept] : [kept, index];
    const isRepeat = from.at(loser) === from.at(winner) && to.at(loser) === to.at(winner);
    const code = isRepeat ? 'interval-repeated' : 'interval-overlap';
    const message = isRepeat
      ? `repeats the interval of ${placeOf(draft, winner)}`
      : `overlaps ${placeOf(draft, winner)} by ${shared.toFixed(2)} m`;
    findings.push({ index: loser, column: 'from', code, message });
    kept = winner;
  }
  return findings;
}

function repeats(draft: TableDraft, nameColumn: 'hole' | 'name', depthColumn: 'depth' | null): OrderFinding[] {
  const findings: OrderFinding[] = [];
  const first = new Map<string, number>();
  const names = draft.categoryColumn(nameColumn).codes;
  const depths = depthColumn ? draft.numberColumn(depthColumn) : null;
  for (let index = 0; index < draft.rows; index++) {
    const key = `${names.at(index)} ${depths?.at(index) ?? ''}`;
    const earlier = first.get(key);
    if (earlier === undefined) {
      first.set(key, index);
      continue;
    }
    const what = depthColumn ? 'station' : nameColumn === 'hole' ? 'collar' : 'fault';
    findings.push({ index, column: depthColumn ?? nameColumn, code: `${what}-repeated`, message: `repeats the ${what} of ${placeOf(draft, earlier)}` });
  }
  return findings;
}
