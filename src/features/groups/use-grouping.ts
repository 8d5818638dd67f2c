import { useQuery } from '@tanstack/react-query';
import type { Grouping } from '#contract/groupings.ts';
import { groupingsQuery } from '#src/lib/analysis-queries.ts';
import { useUrlState } from '#src/lib/url-state.ts';
import { GROUPS_VIEW } from './url.ts';

/** The grouping asked for by the address; else the one domains stand on; else the newest. */
export function groupingInHand(groupings: readonly Grouping[], asked: number | null): Grouping | null {
  return groupings.find(({ id }) => id === asked) ?? groupings.find(({ isActive }) => isActive) ?? groupings[0] ?? null;
}

export function useGroupingInHand(depositId: number) {
  const [view] = useUrlState(GROUPS_VIEW);
  const { data, error, isPending, refetch } = useQuery(groupingsQuery(depositId));
  return { groupings: data ?? [], grouping: groupingInHand(data ?? [], view.grouping), error, isPending, refetch };
}
