import type { ReactNode } from 'react';
import type { Grouping } from '#contract/groupings.ts';
import type { MenuItem } from '#src/components/ui/menu.tsx';
import { CoreGround } from '#src/features/tray/components/core-ground.tsx';
import { SelectionGround } from '#src/features/tray/components/selection-ground.tsx';
import { useTrayLayers } from '#src/features/tray/use-tray-layers.ts';
import { useSelectionFrame } from '#src/lib/selection.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';

interface Props {
  /** The frame the rows of the page belong to; that of the grouping, else of the snapshot, when left out. */
  frameTableId?: number | undefined;
  /** The grouping shown; null for none; the one domains stand on when left out. */
  grouping?: Grouping | null | undefined;
  /** Analyte of the grade track until a person chooses another; the first that pays when left out. */
  analyte?: string | undefined;
  /** What copper marks, where it is not the selection. */
  note?: string | undefined;
  /** What the page can do with one interval, by its menu in the tray. */
  intervalActions?: ((row: number) => readonly MenuItem[]) | undefined;
  /** Wide buttons at the foot of the selection card, main action first. */
  cardActions?: ReactNode;
  /** Further `CardPart`s of the selection card. */
  cardParts?: ReactNode;
}

/**
 * What lies under every analysis page: the core tray at the foot and the card of what is selected.
 * Holes, depths and the grade track live in the address (`holes`, `depth`, `grade`); without them the
 * tray lays the holes of the selection, else those that cut most groups. A deposit without holes has
 * no tray.
 */
export function AnalysisTray({
  frameTableId,
  grouping,
  analyte,
  note,
  intervalActions,
  cardActions,
  cardParts,
}: Props) {
  const depositId = useDepositId();
  const ground = useTrayLayers(depositId, { frameTableId, grouping });
  useSelectionFrame(String(ground.frameTableId ?? 'none'));
  const { layers, snapshot } = ground;
  if (layers === undefined || snapshot === null) return null;
  return (
    <>
      {layers.frame.holes.length > 0 && (
        <CoreGround
          layers={layers}
          snapshot={snapshot}
          analyte={analyte}
          note={note}
          intervalActions={intervalActions}
        />
      )}
      <SelectionGround layers={layers} snapshot={snapshot} actions={cardActions}>
        {cardParts}
      </SelectionGround>
    </>
  );
}
