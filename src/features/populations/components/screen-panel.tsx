import { SlidersHorizontal } from 'lucide-react';
import { useState } from 'react';
import { startScreen } from '#contract/screens.ts';
import type { Grouping } from '#contract/groupings.ts';
import type { Snapshot } from '#contract/snapshots.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Checkbox } from '#src/components/ui/choices.tsx';
import { Panel } from '#src/components/ui/panel.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Segmented } from '#src/components/ui/segmented.tsx';
import { useDeposit, useRefusal } from '#src/lib/use-deposit.ts';
import { useStartScreen, type ScreenRequest } from '../api/populations-queries.ts';

type SubsetKind = NonNullable<ScreenRequest['subsets']>[number];
type Support = NonNullable<ScreenRequest['support']>;

const KINDS: { value: SubsetKind; label: string }[] = [
  { value: 'group', label: 'each group' },
  { value: 'lithology', label: 'each logged rock' },
  { value: 'weathering', label: 'each weathering class' },
];
const MOST_VARIABLES = 20;

interface Props {
  snapshot: Snapshot;
  /** Stands on the snapshot, or null. */
  grouping: Grouping | null;
  started: (jobId: number) => void;
  isRunning: boolean;
  hasScreen: boolean;
  /** Variables of the newest screen, to begin with. */
  lastVariables: readonly string[];
}

function supportsOf({ rows, surfaceRows }: Snapshot): Support[] {
  const supports: Support[] = [];
  if (rows > surfaceRows) supports.push('drill');
  if (surfaceRows > 0) supports.push('surface');
  return supports;
}

/** What to screen and in which subsets; starts the screen. */
export function ScreenPanel({ snapshot, grouping, started, isRunning, hasScreen, lastVariables }: Props) {
  const deposit = useDeposit();
  const supports = supportsOf(snapshot);
  const [support, setSupport] = useState<Support>(grouping?.support ?? supports[0] ?? 'drill');
  const known = snapshot.analytes.filter(({ supports: own }) => own.includes(support)).map(({ analyte }) => analyte);
  const usual = [...deposit.payAnalytes.map(({ analyte }) => analyte), ...deposit.deleteriousAnalytes];
  const [variables, setVariables] = useState<string[]>(lastVariables.length > 0 ? [...lastVariables] : usual);
  const [kinds, setKinds] = useState<SubsetKind[]>(['group', 'lithology', 'weathering']);
  const [isOpen, setIsOpen] = useState(false);
  const start = useStartScreen(deposit.id);
  const refusal = useRefusal(startScreen);
  const wanted = variables.filter((variable) => known.includes(variable));
  const canGroup = grouping !== null && grouping.support === support;
  const toggle = <Value,>(list: readonly Value[], value: Value): Value[] => (list.includes(value) ? list.filter((other) => other !== value) : [...list, value]);
  const unavailable = refusal ?? (isRunning ? 'A screen is running' : wanted.length === 0 ? 'Choose at least one variable' : wanted.length > MOST_VARIABLES ? `Choose at most ${MOST_VARIABLES}` : undefined);

  const run = (): void =>
    start.mutate(
      { support, variables: wanted, groupingId: canGroup && kinds.includes('group') ? grouping.id : null, subsets: kinds },
      { onSuccess: ({ job }) => { started(job.id); setIsOpen(false); } },
    );

  return (
    <Panel label="What to screen" isOpen={isOpen} onOpenChange={setIsOpen} className="w-[26rem]" trigger={<Button kind={hasScreen ? 'plain' : 'main'} icon={SlidersHorizontal}>{hasScreen ? 'Screen again' : 'Screen grades'}</Button>}>
      <div className="grid gap-3">
        {supports.length > 1 && (
          <Segmented label="Support" segments={[{ value: 'drill', label: 'Drill intervals' }, { value: 'surface', label: 'Surface samples' }]} value={support} onPick={setSupport} />
        )}
        <fieldset>
          <legend className="mb-1 font-semibold">Variables ({wanted.length} of {known.length})</legend>
          <div className="grid max-h-48 grid-cols-5 gap-x-2 overflow-auto">
            {known.map((analyte) => (
              <Checkbox key={analyte} label={analyte} checked={variables.includes(analyte)} onChange={() => setVariables(toggle(variables, analyte))} />
            ))}
          </div>
        </fieldset>
        <fieldset>
          <legend className="mb-1 font-semibold">In the whole, and in</legend>
          {KINDS.map(({ value, label }) => (
            <Checkbox
              key={value}
              label={label}
              hint={value === 'group' && !canGroup ? 'no grouping stands on this snapshot yet' : undefined}
              disabled={value === 'group' && !canGroup}
              checked={kinds.includes(value) && (value !== 'group' || canGroup)}
              onChange={() => setKinds(toggle(kinds, value))}
            />
          ))}
        </fieldset>
        {start.error && <Problem error={start.error} />}
        <div className="flex justify-end">
          <Button kind="main" unavailable={unavailable} isBusy={start.isPending} onClick={run}>
            Screen {wanted.length} {wanted.length === 1 ? 'variable' : 'variables'}
          </Button>
        </div>
      </div>
    </Panel>
  );
}
