import type { Adapter, Adapters } from './adapter.ts';
import { AGREEMENT } from './functions/agreement.ts';
import { CLUSTER_QUALITY } from './functions/cluster-quality.ts';
import { CROSSTAB } from './functions/crosstab.ts';
import { DBSCAN } from './functions/dbscan.ts';
import { DESURVEY } from './functions/desurvey.ts';
import { DIP } from './functions/dip.ts';
import { DIRECTIONS } from './functions/directions.ts';
import { GMM } from './functions/gmm.ts';
import { GROUP_TEST } from './functions/group-test.ts';
import { HIERARCHICAL } from './functions/hierarchical.ts';
import { KMEANS } from './functions/kmeans.ts';
import { LOGRATIO } from './functions/logratio.ts';
import { MIXTURE_1D } from './functions/mixture-1d.ts';
import { NORMALITY } from './functions/normality.ts';
import { PCA } from './functions/pca.ts';
import { PROBABILITY_PLOT } from './functions/probability-plot.ts';
import { ROBUST } from './functions/robust.ts';
import { STRUCTURE } from './functions/structure.ts';
import { UNIVARIATE } from './functions/univariate.ts';

const GROUPS: readonly Adapters[] = [
  AGREEMENT,
  CLUSTER_QUALITY,
  CROSSTAB,
  DBSCAN,
  DESURVEY,
  DIP,
  DIRECTIONS,
  GMM,
  GROUP_TEST,
  HIERARCHICAL,
  KMEANS,
  LOGRATIO,
  MIXTURE_1D,
  NORMALITY,
  PCA,
  PROBABILITY_PLOT,
  ROBUST,
  STRUCTURE,
  UNIVARIATE,
];

/** Every function the project can compute, by the name the sets give it. */
export const ALL_FUNCTIONS: ReadonlyMap<string, Adapter> = new Map(
  GROUPS.flatMap((adapters) => Object.entries(adapters)),
);
