import { useCallback, useMemo, useState } from 'react';
import type { Deposit } from '#contract/deposits.ts';
import type { HoleDetail } from '#contract/holes.ts';
import type { Snapshot } from '#contract/snapshots.ts';
import type { DepthInterval } from '#src/components/charts/core-types.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { countOf } from '#src/lib/format.ts';
import { urlNumbers, urlOneOf, urlText, useUrlState } from '#src/lib/url-state.ts';
import { shownUnit } from '../units.ts';
import { AssaysPlate } from './assays-plate.tsx';
import { CorePlate } from './core-plate.tsx';
import { LogsPlate, LOGS } from './logs-plate.tsx';

const VIEW = { grade: urlText(), depth: urlNumbers(), log: urlOneOf(LOGS, 'lithology') };
const NO_CODES: readonly string[] = [];

interface Props {
  deposit: Deposit;
  hole: HoleDetail;
  snapshot: Snapshot | null;
}

/** One hole: its core drawn, its assays and logs as tables; a row taken in a table is framed on the core. */
export function HoleView({ deposit, hole, snapshot }: Props) {
  const { payAnalytes, deleteriousAnalytes } = deposit;
  const [{ grade, depth, log }, setView] = useUrlState(VIEW);
  const [framed, setFramed] = useState<(DepthInterval & { row: number | null }) | null>(null);
  const summaries = snapshot?.analytes;
  const unitOf = useCallback((analyte: string) => shownUnit(analyte, payAnalytes, summaries ?? []), [payAnalytes, summaries]);
  const first = payAnalytes.find(({ analyte }) => hole.analytes.includes(analyte))?.analyte ?? hole.analytes[0] ?? '';
  const analyte = hole.analytes.includes(grade) ? grade : first;
  const chief = useMemo(() => [...new Set([...payAnalytes.map((pay) => pay.analyte), ...deleteriousAnalytes, analyte])], [payAnalytes, deleteriousAnalytes, analyte]);
  const rockCodes = useMemo(() => {
    const known = snapshot?.lithologies.map(({ code }) => code) ?? NO_CODES;
    return [...known, ...hole.lithology.map(({ code }) => code).filter((code) => !known.includes(code))];
  }, [snapshot, hole]);
  return (
    <div className="grid gap-3">
      <CorePlate
        {...{ hole, rockCodes, analyte, depth, framed }}
        unit={unitOf(analyte)}
        onAnalyte={(next) => setView({ grade: next })}
        onDepth={(next) => setView({ depth: next })}
      />
      <div className="grid items-start gap-3 lg:grid-cols-[minmax(0,1.35fr)_minmax(0,1fr)]">
        <AssaysPlate hole={hole} chief={chief} unitOf={unitOf} framedRow={framed?.row ?? null} onFrame={setFramed} />
        <div className="grid min-w-0 gap-3">
          <LogsPlate hole={hole} log={log} onLog={(next) => setView({ log: next })} framed={framed} onFrame={(next) => setFramed(next && { ...next, row: null })} />
          {hole.notes.length > 0 && (
            <Plate title="Notes" qualifier={countOf(hole.notes.length, 'note')}>
              <ul className="m-0 grid list-none gap-1 p-0 text-small">
                {hole.notes.map((note) => (
                  <li key={note} className="border-b border-rule py-1 last:border-0">{note}</li>
                ))}
              </ul>
            </Plate>
          )}
        </div>
      </div>
    </div>
  );
}
