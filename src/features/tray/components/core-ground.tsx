import { useQueries } from '@tanstack/react-query';
import { useCallback, useEffect, useMemo, useState } from 'react';
import * as z from 'zod';
import type { PayAnalyte } from '#contract/deposits.ts';
import type { Snapshot } from '#contract/snapshots.ts';
import type { SelectMode } from '#src/components/charts/chart-types.ts';
import type { DepthWindow } from '#src/components/charts/depth-window.ts';
import { assignPatterns, type RockKeyEntry } from '#src/components/charts/rock-patterns.tsx';
import { TrayPortal } from '#src/components/layout/slots.tsx';
import { CoreTray } from '#src/components/tray/core-tray.tsx';
import type { MenuPlace } from '#src/components/tray/tray-types.ts';
import type { MenuItem } from '#src/components/ui/menu.tsx';
import { holeQuery } from '#src/lib/analysis-queries.ts';
import { countOf, gradeToPpm } from '#src/lib/format.ts';
import { usePreference } from '#src/lib/preferences.ts';
import { hoverRow, takeRows, useHoveredRow, useSelection } from '#src/lib/selection.ts';
import { useUrlState } from '#src/lib/url-state.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import { layHole, metresByHole, tellingHoles, type GradeTrack, type TrayLayers } from '../tray-data.ts';
import { TRAY_VIEW } from '../url.ts';
import { IntervalMenu } from './interval-menu.tsx';

interface Props {
  layers: TrayLayers;
  snapshot: Snapshot;
  /** Analyte of the grade track until a person chooses another. */
  analyte?: string | undefined;
  note?: string | undefined;
  intervalActions?: ((row: number) => readonly MenuItem[]) | undefined;
}

const Height = z.number().int().min(120).max(640);
/** Two holes with all their tracks. */
const USUAL_PX = 220;
const SHUT_PX = 36;
/** Holes laid by themselves: as many as the usual height shows. */
const BY_ITSELF = 2;

/** The core tray of an analysis page: holes of the address, else of the selection, else the telling ones. */
export function CoreGround({ layers, snapshot, analyte, note, intervalActions }: Props) {
  const { frame, grouping } = layers;
  const { payAnalytes } = useDeposit();
  const [view, setView] = useUrlState(TRAY_VIEW);
  const [height, setHeight] = usePreference('tray-height', Height, USUAL_PX);
  const [isOpen, setOpen] = usePreference('tray-open', z.boolean(), true);
  const [menu, setMenu] = useState<{ row: number; place: MenuPlace } | null>(null);
  const selection = useSelection();
  const hoveredRow = useHoveredRow();
  const names = useLaidHoles(layers, view.holes);
  const track = useGradeTrack(snapshot, view.grade, analyte);
  const holes = useHolesInHand(names, layers, track);
  const groups = useMemo(() => (grouping?.groups ?? []).map(({ name, slot }) => ({ label: name, slot })), [grouping]);
  const rockKey = useMemo(() => rocksOf(snapshot), [snapshot]);
  const gradeNames = useMemo(() => gradeChoices(snapshot, payAnalytes), [snapshot, payAnalytes]);
  const depth = view.depth;
  const window = useMemo((): DepthWindow | null => (depth.length === 2 && depth[0] !== undefined && depth[1] !== undefined && depth[0] < depth[1] ? [depth[0], depth[1]] : null), [depth]);
  const onWindow = useCallback((next: DepthWindow | null) => setView({ depth: next === null ? [] : next.map((metres) => Math.round(metres * 10) / 10) }), [setView]);
  const onSelect = useCallback((rows: number[], mode: SelectMode) => takeRows(rows, 'taken in the tray', mode), []);
  useTrayHeight(isOpen ? height : SHUT_PX);
  const away = useMemo(() => metresByHole(frame, selection.rows).filter(({ hole }) => !names.includes(hole)), [frame, selection, names]);
  const taken = selection.rows.length;
  return (
    <TrayPortal>
      <CoreTray
        holes={holes}
        holeNames={snapshot.holes > 0 ? frame.holes : []}
        onAddHole={(name) => setView({ holes: [...names.filter((other) => other !== name), name] })}
        onRemoveHole={(name) => setView({ holes: names.filter((other) => other !== name) })}
        rockKey={rockKey}
        groups={groups}
        gradeLabel={track === null ? 'grade' : `${track.analyte} ${track.unit}`}
        {...(track === null ? {} : { grades: { names: gradeNames, chosen: track.analyte, onChoose: (name: string) => setView({ grade: name }) } })}
        selectedRows={selection}
        hoveredRow={hoveredRow}
        onHover={hoverRow}
        onSelect={onSelect}
        onOpenMenu={(row, place) => setMenu({ row, place })}
        window={window}
        onWindowChange={onWindow}
        isOpen={isOpen}
        onOpen={setOpen}
        height={height}
        onHeight={setHeight}
        note={noteOf(note, taken, away.length)}
        summary={taken === 0 ? `${names.join(', ')} laid; nothing selected` : `${countOf(taken, 'interval')} in ${countOf(metresByHole(frame, selection.rows).length, 'hole')}`}
      />
      {menu !== null && <IntervalMenu layers={layers} row={menu.row} place={menu.place} more={intervalActions?.(menu.row) ?? []} onClose={() => setMenu(null)} />}
    </TrayPortal>
  );
}

function noteOf(note: string | undefined, taken: number, away: number): string {
  if (note !== undefined) return note;
  if (taken === 0) return '';
  return away === 0 ? 'copper bars mark the selection' : `copper bars mark the selection, ${countOf(away, 'more hole')} of it not laid`;
}

/** Holes asked for by the address that exist; else those with most of the selection; else the telling ones. */
function useLaidHoles({ frame, columns }: TrayLayers, asked: readonly string[]): readonly string[] {
  const selection = useSelection();
  const telling = useMemo(() => tellingHoles(frame, columns, BY_ITSELF), [frame, columns]);
  return useMemo(() => {
    const known = asked.filter((name) => frame.rangeOf.has(name));
    if (known.length > 0) return [...new Set(known)];
    const chosen = metresByHole(frame, selection.rows).slice(0, BY_ITSELF).map(({ hole }) => hole);
    return chosen.length > 0 ? chosen : telling;
  }, [asked, frame, selection, telling]);
}

interface Track extends GradeTrack {
  unit: string;
}

/** The analyte of the grade track: asked for, else the page's, else the first that pays. */
function useGradeTrack(snapshot: Snapshot, asked: string, usual: string | undefined): Track | null {
  const { payAnalytes } = useDeposit();
  return useMemo(() => {
    const drilled = new Set(snapshot.analytes.filter(({ supports }) => supports.includes('drill')).map(({ analyte }) => analyte));
    const wanted = [asked, usual ?? '', ...payAnalytes.map(({ analyte }) => analyte)].find((name) => drilled.has(name));
    if (wanted === undefined) return null;
    const unit = shownUnit(payAnalytes, wanted);
    return { analyte: wanted, unit, ppmPerUnit: gradeToPpm(1, unit) };
  }, [snapshot, asked, usual, payAnalytes]);
}

/** Analytes of the drill intervals, those that pay first. */
function gradeChoices(snapshot: Snapshot, payAnalytes: readonly PayAnalyte[]): string[] {
  const names = snapshot.analytes.filter(({ supports }) => supports.includes('drill')).map(({ analyte }) => analyte);
  const pays = new Set(payAnalytes.map(({ analyte }) => analyte));
  return [...names.filter((name) => pays.has(name)), ...names.filter((name) => !pays.has(name))];
}

const shownUnit = (payAnalytes: readonly PayAnalyte[], analyte: string) => payAnalytes.find((pay) => pay.analyte === analyte)?.unit ?? 'ppm';

/** Holes read so far, in the order asked for; one that is gone from the current snapshot is left out. */
function useHolesInHand(names: readonly string[], layers: TrayLayers, track: Track | null) {
  const { id } = useDeposit();
  const details = useQueries({ queries: names.map((name) => holeQuery(id, name)), combine: (results) => results.map(({ data }) => data) });
  return useMemo(() => details.flatMap((detail) => (detail === undefined ? [] : [layHole(detail, layers, track)])), [details, layers, track]);
}

function rocksOf({ lithologies }: Snapshot): RockKeyEntry[] {
  const codes = lithologies.map(({ code }) => code);
  const patterns = assignPatterns(codes);
  return codes.map((code) => ({ code, pattern: patterns.get(code) ?? null, label: code }));
}

/** Floating notices stand above the tray: they read its height from the root. */
function useTrayHeight(height: number): void {
  useEffect(() => {
    document.documentElement.style.setProperty('--tray-now', `${height}px`);
    return () => void document.documentElement.style.removeProperty('--tray-now');
  }, [height]);
}
