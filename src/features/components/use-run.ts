import { useQuery } from '@tanstack/react-query';
import type { ComponentRun } from '#contract/components.ts';
import { componentRunsQuery } from '#src/lib/analysis-queries.ts';
import { useUrlState } from '#src/lib/url-state.ts';
import { COMPONENTS_VIEW } from './url.ts';

interface Asked {
  run: number | null;
  suite: number | null;
}

/** The run asked for by the address; else the newest of the suite asked for, which may have none; else the newest. */
export function runInHand(runs: readonly ComponentRun[], { run, suite }: Asked): ComponentRun | null {
  const asked = runs.find(({ id }) => id === run);
  if (asked !== undefined) return asked;
  const among = suite === null ? runs : runs.filter(({ suiteId }) => suiteId === suite);
  return among[0] ?? null;
}

export function useRunInHand(depositId: number) {
  const [view] = useUrlState(COMPONENTS_VIEW);
  const { data, error, isPending, refetch } = useQuery(componentRunsQuery(depositId));
  const runs: readonly ComponentRun[] = data ?? [];
  return { runs, run: runInHand(runs, view), error, isPending, refetch };
}
