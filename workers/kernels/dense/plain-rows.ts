import { NO_LABEL, type DenseMath, type RowGroups, type RowTable } from './dense-math.ts';
import { squaredDistance } from './squared-distance.ts';

interface Nearest {
  label: number;
  sq: number;
  nextSq: number;
}

function nearestOf({ points, stride }: RowTable, row: number, centres: Float64Array, k: number): Nearest {
  const found = { label: 0, sq: Infinity, nextSq: Infinity };
  for (let c = 0; c < k; c++) {
    const sq = squaredDistance(points, row, centres, c, stride);
    if (sq < found.sq) {
      found.nextSq = found.sq;
      found.sq = sq;
      found.label = c;
    } else if (sq < found.nextSq) found.nextSq = sq;
  }
  return found;
}

function addRow({ points, stride }: RowTable, row: number, sums: Float64Array, group: number, weight: number): void {
  for (let j = 0; j < stride; j++) sums[group * stride + j]! += weight * points[row * stride + j]!;
}

/** Moves a centre by `share` of the way to a row; returns how far, squared. */
function shift({ points, stride }: RowTable, row: number, centres: Float64Array, c: number, share: number): number {
  const moved = [0, 0];
  for (let j = 0; j < stride; j++) {
    const step = share * (points[row * stride + j]! - centres[c * stride + j]!);
    moved[j % 2]! += step * step;
    centres[c * stride + j]! += step;
  }
  return moved[0]! + moved[1]!;
}

const weightOf = ({ weights }: RowTable, row: number): number => (weights ? weights[row]! : 1);

type RowMath = Pick<DenseMath, 'nearestTwo' | 'assign' | 'sumGroups' | 'exchange'>;

/** The part of `DenseMath` that works on rows, in plain loops. */
export const plainRows: RowMath = {
  nearestTwo(rows, centres, k, labels, nearestSq, nextSq) {
    for (let i = 0; i < rows.n; i++) {
      const found = nearestOf(rows, i, centres, k);
      labels[i] = found.label;
      nearestSq[i] = found.sq;
      nextSq[i] = found.nextSq;
    }
  },

  assign(rows, { k, centres, labels, lead, sums, mass, counts }, slack) {
    let changed = 0;
    for (let i = 0; i < rows.n; i++) {
      const old = labels[i]!;
      if (old !== NO_LABEL && lead[i]! > slack[old]!) continue;
      const { label, sq, nextSq } = nearestOf(rows, i, centres, k);
      lead[i] = Math.sqrt(nextSq) - Math.sqrt(sq) + slack[label]!;
      if (label === old) continue;
      changed += 1;
      const w = weightOf(rows, i);
      if (old !== NO_LABEL) {
        mass[old]! -= w;
        counts[old]! -= 1;
        addRow(rows, i, sums, old, -w);
      }
      mass[label]! += w;
      counts[label]! += 1;
      addRow(rows, i, sums, label, w);
      labels[i] = label;
    }
    return changed;
  },

  sumGroups(rows, { centres, labels, sums, mass }) {
    let inertia = 0;
    for (let i = 0; i < rows.n; i++) {
      const [label, w] = [labels[i]!, weightOf(rows, i)];
      mass[label]! += w;
      inertia += w * squaredDistance(rows.points, i, centres, label, rows.stride);
      addRow(rows, i, sums, label, w);
    }
    return inertia;
  },

  exchange(rows, groups, reach, least, maxPasses) {
    const { n } = rows;
    const { labels, mass, counts, lead, centres } = groups;
    let mayPass = true;
    let [gained, drift] = [0, 0];
    for (let pass = 0, sinceMove = 0; pass < maxPasses && sinceMove < n; pass++) {
      for (let i = 0; i < n && sinceMove < n; i++, sinceMove++) {
        if (mayPass && lead[i]! - drift > reach) continue;
        const from = labels[i]!;
        if (counts[from]! < 2) continue;
        const w = weightOf(rows, i);
        const own = mass[from]!;
        const found = cheapestGroup(rows, groups, i, w);
        if (found.to === from) {
          lead[i] = Math.sqrt(found.nextSq) - Math.sqrt(found.ownSq) + drift;
          continue;
        }
        gained += found.gain;
        const other = mass[found.to]!;
        drift += Math.sqrt(shift(rows, i, centres, from, -w / (own - w)));
        drift += Math.sqrt(shift(rows, i, centres, found.to, w / (other + w)));
        mass[from] = own - w;
        mass[found.to] = other + w;
        counts[from]! -= 1;
        counts[found.to]! += 1;
        labels[i] = found.to;
        lead[i] = -Infinity;
        if (own - w < least) mayPass = false;
        sinceMove = 0;
      }
    }
    return gained;
  },
};

/** The group a row is cheapest in once both means have followed it. */
function cheapestGroup(
  { points, stride }: RowTable,
  { k, centres, labels, mass }: RowGroups,
  i: number,
  w: number,
): { to: number; gain: number; ownSq: number; nextSq: number } {
  const from = labels[i]!;
  const ownSq = squaredDistance(points, i, centres, from, stride);
  const out = (w * mass[from]! * ownSq) / (mass[from]! - w);
  let to = from;
  let into = out * (1 - 1e-12); // rounding alone moves nothing
  let nextSq = Infinity;
  for (let c = 0; c < k; c++) {
    if (c === from) continue;
    const sq = squaredDistance(points, i, centres, c, stride);
    nextSq = Math.min(nextSq, sq);
    const cost = (w * mass[c]! * sq) / (mass[c]! + w);
    if (cost >= into) continue;
    into = cost;
    to = c;
  }
  return { to, gain: out - into, ownSq, nextSq };
}
