import { useMutation, useQueryClient, type QueryClient } from '@tanstack/react-query';
import type { Group } from '#contract/groupings.ts';
import { startGrouping, startSweep, updateGroup, useGrouping as standOnGrouping } from '#contract/groupings.ts';
import { groupingsQuery } from '#src/lib/analysis-queries.ts';
import { call } from '#src/lib/api-client.ts';
import { rememberJob } from '#src/lib/jobs.ts';
import { notify, notifyEdit, notifyProblem } from '#src/lib/toasts.ts';

export interface SweepBody {
  componentRunId: number;
  components: number;
  kFrom: number;
  kTo: number;
  seed: number;
}

export interface GroupingBody {
  componentRunId: number;
  components: number;
  k: number;
  seed: number;
  name?: string;
}

/** Tries every number of groups; the job shows on the page. */
export function useSweep(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: SweepBody) => call(startSweep, { params: { depositId }, body }),
    onSuccess: ({ job }) => rememberJob(queryClient, job),
  });
}

export function useGroupRun(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: GroupingBody) => call(startGrouping, { params: { depositId }, body }),
    onSuccess: ({ job }) => rememberJob(queryClient, job),
  });
}

/** Lets candidate domains stand on a grouping. */
export function useStandOn(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (groupingId: number) => call(standOnGrouping, { params: { depositId, groupingId } }),
    onSuccess: async ({ name }) => {
      await queryClient.invalidateQueries({ queryKey: groupingsQuery(depositId).queryKey });
      await queryClient.invalidateQueries({ queryKey: ['deposits', depositId, 'domains'] });
      notify(`Domains stand on “${name}”.`);
    },
    onError: notifyProblem,
  });
}

export interface GroupChange {
  name?: string;
  slot?: number;
}

interface GroupKey {
  depositId: number;
  groupingId: number;
  label: number;
}

function groupNow(queryClient: QueryClient, { depositId, groupingId, label }: GroupKey): Group | undefined {
  return queryClient.getQueryData(groupingsQuery(depositId).queryKey)?.find(({ id }) => id === groupingId)?.groups.find((group) => group.label === label);
}

/** Writes on the version the page shows, and puts the answer into the list. */
async function changeGroup(queryClient: QueryClient, key: GroupKey, change: GroupChange): Promise<Group> {
  const { depositId, groupingId, label } = key;
  const group = await call(updateGroup, { params: { depositId, groupingId, label }, body: change, ifMatch: groupNow(queryClient, key)?.version ?? 1 });
  queryClient.setQueryData(groupingsQuery(depositId).queryKey, (groupings) =>
    groupings?.map((grouping) => (grouping.id === groupingId ? { ...grouping, groups: grouping.groups.map((other) => (other.label === label ? group : other)) } : grouping)),
  );
  return group;
}

/** Renames or recolours a group, with the way back. */
export function useChangeGroup(depositId: number, groupingId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: async ({ label, change }: { label: number; change: GroupChange }) => {
      const key = { depositId, groupingId, label };
      const before = groupNow(queryClient, key);
      const after = await changeGroup(queryClient, key, change);
      if (before === undefined) return;
      const back: GroupChange = change.name === undefined ? { slot: before.slot } : { name: before.name };
      notifyEdit({
        label: change.name === undefined ? `${after.name} has another colour` : `${before.name} is now ${after.name}`,
        undo: () => changeGroup(queryClient, key, back),
        redo: () => changeGroup(queryClient, key, change),
      });
    },
    onError: (error) => {
      notifyProblem(error);
      void queryClient.invalidateQueries({ queryKey: groupingsQuery(depositId).queryKey });
    },
  });
}
