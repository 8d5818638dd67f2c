import type { FileCheck } from '#contract/files.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { cx } from '#src/lib/cx.ts';
import { countOf, formatCount } from '#src/lib/format.ts';
import { runMarks, runTicks } from '../file-run.ts';

/** The whole file as one run of core, its rows from left to right. */
export function FileRunPlate({ check, rowCount }: { check: FileCheck | null; rowCount: number }) {
  const rows = check?.rows ?? rowCount;
  const description = check
    ? `${countOf(rows, 'row')} as one run: ${formatCount(check.rowsAside)} set aside, ${formatCount(check.warnings)} with a warning`
    : `${countOf(rows, 'row')} as one run, not checked yet`;
  return (
    <Plate title="The file from first row to last" qualifier={<span className="max-md:hidden">{check ? 'ink: loads as it is; hatched: loads with a warning; copper: set aside' : 'not checked yet'}</span>}>
      <div role="img" aria-label={description} className="pb-1">
        <div aria-hidden className="relative mx-0.5 h-3.5">
          {runTicks(rows + 1).map(({ at, label }) => (
            <span key={at} className={cx('absolute bottom-0 border-l border-rule-firm', label === null ? 'h-1' : 'h-2.5 pl-[3px] text-tick leading-[9px] text-ink-3')} style={{ left: `${at * 100}%` }}>
              {label !== null && at < 0.96 && (at === 0 ? 'row 0' : formatCount(Number(label)))}
            </span>
          ))}
        </div>
        <div className="relative h-5 rounded-1 border border-trough-deep bg-trough px-px py-[2px]">
          <div className={cx('relative h-full', check ? 'bg-ink-3' : 'border border-rule-firm bg-sheet')}>
            {check && runMarks(check).map(({ start, width, severity, label }) => (
              <span
                key={`${start} ${severity}`}
                title={label}
                className={cx('absolute min-w-[3.5px] -translate-x-px', severity === 'aside' ? '-inset-y-[3px] border-x border-sheet bg-copper' : 'hatch -inset-y-px border border-warn bg-sheet [--hatch:var(--warn)]')}
                style={{ left: `${start * 100}%`, width: `${width * 100}%` }}
              />
            ))}
          </div>
        </div>
      </div>
    </Plate>
  );
}
