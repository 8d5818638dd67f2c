import { cutTree } from '#kernels/clustering/cut-tree.ts';
import {
  hierarchicalTree,
  type HierarchicalTree,
  type Linkage,
} from '#kernels/clustering/hierarchical.ts';
import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import { dataKey, inputNumber, remembered, type Adapters } from '../adapter.ts';
import { transformedColumns } from '../transform.ts';

const LINKAGES: readonly Linkage[] = ['ward', 'average', 'complete'];

const trees = remembered<HierarchicalTree>();

function treeOf(set: ReferenceSet, check: ReferenceCheck, linkage: Linkage): HierarchicalTree {
  return trees(`${dataKey(set, check)} ${linkage}`, () =>
    hierarchicalTree({ columns: transformedColumns(set, check), linkage }),
  );
}

const ofLinkage = (linkage: Linkage): Adapters => ({
  [`${linkage}_merge_heights_last`]: (set, check) =>
    treeOf(set, check, linkage).heights.slice(-inputNumber(check, 'count')),
  [`${linkage}_merge_heights_sum`]: (set, check) =>
    treeOf(set, check, linkage).heights.reduce((sum, height) => sum + height, 0),
  [`${linkage}_labels`]: (set, check) =>
    cutTree(treeOf(set, check, linkage), inputNumber(check, 'k')),
});

/** Merge trees, their heights and the groups cut from them. */
export const HIERARCHICAL: Adapters = Object.fromEntries(
  LINKAGES.flatMap((linkage) => Object.entries(ofLinkage(linkage))),
);
