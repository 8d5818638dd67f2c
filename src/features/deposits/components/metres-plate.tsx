import type { Overview } from '#contract/deposits.ts';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { cx } from '#src/lib/cx.ts';
import { formatCount, formatMetres } from '#src/lib/format.ts';
import { notchStep, rulerOf, type Ruler } from '../ruler.ts';

/** How far the drilled metres have come, each step a run of core under one ruler. */
export function MetresPlate({ overview }: { overview: Overview }) {
  const { totalMetres, metres } = overview;
  const step = notchStep(totalMetres);
  if (totalMetres <= 0) {
    return (
      <Plate title="How far the metres have come">
        <Empty>
          Each step of the job is drawn here as a run of core against the metres drilled. Collars,
          surveys and assays come first.
        </Empty>
      </Plate>
    );
  }
  return (
    <Plate
      title="How far the metres have come"
      qualifier={
        <span className="max-md:hidden">
          each run is the whole deposit; notches every {formatCount(step)} m
        </span>
      }
    >
      <div className="grid grid-cols-[auto_minmax(0,1fr)_auto] items-center gap-x-2 gap-y-[7px] pb-1 text-caption md:grid-cols-[auto_minmax(0,1fr)_auto_auto]">
        <RulerLine ruler={rulerOf(totalMetres)} />
        {metres.map((run) => (
          <MetresLine key={run.label} run={run} total={totalMetres} step={step} />
        ))}
      </div>
    </Plate>
  );
}

function RulerLine({ ruler }: { ruler: Ruler }) {
  return (
    <div aria-hidden className="relative col-start-2 h-3.5">
      {ruler.minor.map((share) => (
        <span
          key={share}
          className="absolute bottom-0 h-[5px] w-px bg-rule-firm"
          style={{ left: `${share * 100}%` }}
        />
      ))}
      {ruler.major.map(({ share, label }) => (
        <span
          key={share}
          className="absolute bottom-0 h-2.5 border-l border-rule-firm pl-[3px] text-tick leading-[9px] text-ink-3"
          style={{ left: `${share * 100}%` }}
        >
          {share < 0.96 && label}
        </span>
      ))}
    </div>
  );
}

interface LineProps {
  run: Overview['metres'][number];
  total: number;
  step: number;
}

function MetresLine({ run, total, step }: LineProps) {
  const { label, metres, note, isStale } = run;
  const share = Math.min(1, metres / total);
  const notches = Array.from(
    { length: Math.ceil(metres / step) - 1 },
    (_, index) => ((index + 1) * step) / total,
  );
  return (
    <>
      <span className="col-start-1 text-right text-ink-2">{label}</span>
      <div
        className="h-4 rounded-1 border border-trough-deep bg-trough py-px"
        role="img"
        aria-label={`${label}: ${formatMetres(metres)} of ${formatMetres(total)}${isStale ? ', stale' : ''}${note ? `, ${note}` : ''}`}
      >
        <div className="relative h-full">
          <span
            className={cx('block h-full', isStale ? 'hatch bg-sheet' : 'bg-ink-3')}
            style={{ width: `${share * 100}%` }}
          />
          {notches.map((notch) => (
            <span
              key={notch}
              className="absolute inset-y-0 w-[1.5px] -translate-x-1/2 bg-trough"
              style={{ left: `${notch * 100}%` }}
            />
          ))}
        </div>
      </div>
      <span aria-hidden className="font-semibold whitespace-nowrap">
        {formatMetres(metres)}
      </span>
      <span aria-hidden className="min-w-24 whitespace-nowrap text-tick text-ink-3 max-md:hidden">
        {note}
      </span>
    </>
  );
}
