import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { Grouping } from '#contract/groupings.ts';
import { domainListQuery, groupingsQuery } from '#src/lib/analysis-queries.ts';
import { columnQuery } from '#src/lib/columns.ts';
import { snapshotQuery } from '#src/lib/deposit-queries.ts';
import { frameQuery } from '#src/lib/frame.ts';
import type { TrayLayers } from './tray-data.ts';

export interface GroundChoice {
  /** The frame the rows of the page belong to; that of the grouping, else of the snapshot, when left out. */
  frameTableId?: number | undefined;
  /** The grouping shown; null for none; the one domains stand on when left out. */
  grouping?: Grouping | null | undefined;
}

/** The grouping to show on a frame: groups of another frame would colour the wrong rows. */
export function groupingFor({ frameTableId, grouping }: GroundChoice, all: readonly Grouping[], snapshotFrame: number | undefined): Grouping | null {
  if (grouping === null) return null;
  const wanted = grouping ?? all.find(({ isActive, frameTableId: own }) => isActive && own === (frameTableId ?? snapshotFrame));
  if (wanted === undefined || (frameTableId !== undefined && wanted.frameTableId !== frameTableId)) return null;
  return wanted;
}

/** Reads all that colours the rows of an analysis page. `layers` is undefined until the frame is read. */
export function useTrayLayers(depositId: number, choice: GroundChoice) {
  const snapshot = useQuery(snapshotQuery(depositId)).data?.snapshot ?? null;
  const { data: groupings } = useQuery({ ...groupingsQuery(depositId), enabled: choice.grouping === undefined });
  const grouping = groupingFor(choice, groupings ?? [], snapshot?.frameTableId);
  const frameTableId = choice.frameTableId ?? grouping?.frameTableId ?? snapshot?.frameTableId ?? null;
  const isReady = frameTableId !== null;
  const { data: frame, error } = useQuery({ ...frameQuery(depositId, frameTableId ?? 0), enabled: isReady });
  const tableId = grouping?.tableId ?? 0;
  const { data: label } = useQuery({ ...columnQuery(depositId, tableId, 'group'), enabled: grouping !== null });
  const { data: membership } = useQuery({ ...columnQuery(depositId, tableId, 'membership'), enabled: grouping !== null });
  const { data: domains } = useQuery(domainListQuery(depositId));
  const layers = useMemo((): TrayLayers | undefined => {
    if (frame === undefined) return undefined;
    return { frame, grouping, columns: label && membership ? { label, membership } : null, domains };
  }, [frame, grouping, label, membership, domains]);
  return { layers, snapshot, frameTableId, error };
}
