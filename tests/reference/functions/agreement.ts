import { adjustedRandIndex } from '#kernels/clustering/agreement.ts';
import { categoryFrom } from '#kernels/tables/category.ts';
import { labelsBesideTexts } from '#tests/support/reference.ts';
import { inputText, type Adapters } from '../adapter.ts';

/** Given labels against a class column. */
export const AGREEMENT: Adapters = {
  adjusted_rand_index: (set, check) => {
    const { labels, texts } = labelsBesideTexts(set, check, inputText(check, 'class_column'));
    const classes = categoryFrom(texts).codes.map((code) => code + 1); // the kernel reads 0 as unassigned
    return adjustedRandIndex(labels, classes);
  },
};
