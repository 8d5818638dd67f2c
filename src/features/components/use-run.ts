import { useQuery } from '@tanstack/react-query';
import type { ComponentRun } from '#contract/components.ts';
import { componentRunsQuery } from '#src/lib/analysis-queries.ts';
import { useUrlState } from '#src/lib/url-state.ts';
import { COMPONENTS_VIEW } from './url.ts';

/** The run asked for by the address, else the newest. */
export function useRunInHand(depositId: number) {
  const [view] = useUrlState(COMPONENTS_VIEW);
  const { data, error, isPending, refetch } = useQuery(componentRunsQuery(depositId));
  const runs: readonly ComponentRun[] = data ?? [];
  return { runs, run: runs.find(({ id }) => id === view.run) ?? runs[0] ?? null, error, isPending, refetch };
}
