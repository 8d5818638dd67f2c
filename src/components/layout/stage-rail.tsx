import type { ReactNode } from 'react';
import { NavLink } from 'react-router-dom';
import type { Stage } from '#contract/deposits.ts';
import { STAGE_NAMES, stagePath } from '#src/lib/stages.ts';
import { cx } from '#src/lib/cx.ts';

interface Props {
  depositId: number;
  stages: readonly Stage[];
  /** At the foot: the snapshot. */
  foot?: ReactNode;
}

/** The stages in the order of the job, each with its state in words and as a run. */
export function StageRail({ depositId, stages, foot }: Props) {
  return (
    <nav
      aria-label="Stages"
      className="flex min-h-0 w-14 shrink-0 flex-col overflow-x-hidden overflow-y-auto border-r border-rule pt-2.5 max-md:hidden lg:w-[11.5rem]"
    >
      <ol className="m-0 list-none p-0">
        {stages.map((stage, index) => (
          <li key={stage.key}>
            <StageLink depositId={depositId} stage={stage} number={index + 1} />
          </li>
        ))}
      </ol>
      {foot && (
        <div className="mt-auto grid border-t border-rule px-3 py-2 text-caption text-ink-3 empty:hidden max-lg:hidden">
          {foot}
        </div>
      )}
    </nav>
  );
}

function StageLink({
  depositId,
  stage,
  number,
}: {
  depositId: number;
  stage: Stage;
  number: number;
}) {
  const { key, state, word, waitsFor } = stage;
  const title = [STAGE_NAMES[key], word, waitsFor && `waits for ${waitsFor}`]
    .filter(Boolean)
    .join(': ');
  return (
    <NavLink
      to={stagePath(depositId, key)}
      end={key === 'deposit'}
      title={title}
      className="group relative grid grid-cols-1 items-baseline px-2.5 pt-1 pb-2 text-ink no-underline hover:bg-trough focus-visible:-outline-offset-2 aria-[current=page]:bg-sheet aria-[current=page]:before:absolute aria-[current=page]:before:top-1 aria-[current=page]:before:bottom-0.5 aria-[current=page]:before:left-0 aria-[current=page]:before:w-[3px] aria-[current=page]:before:bg-copper lg:grid-cols-[1.5rem_1fr_auto] lg:pr-3"
    >
      <span
        aria-hidden
        className="pb-1 font-mono text-small leading-none text-ink-3 lg:pb-0 lg:text-tick lg:leading-none"
      >
        {number}
      </span>
      <span className="text-body group-aria-[current=page]:font-semibold max-lg:sr-only">
        {STAGE_NAMES[key]}
      </span>
      <span
        className={cx(
          'text-caption max-lg:sr-only',
          state === 'attention'
            ? 'font-semibold text-copper'
            : state === 'stale'
              ? 'text-ink-2 italic'
              : 'text-ink-3',
        )}
      >
        {word}
      </span>
      <StageRun state={state} />
    </NavLink>
  );
}

/** Empty: dotted; ready: outline; attention: ink, a copper piece, bare; stale: hatch; done: solid. */
function StageRun({ state }: { state: Stage['state'] }) {
  const place =
    'absolute bottom-[3px] right-2.5 left-2.5 h-1 lg:right-3 lg:left-[2.125rem] rounded-[1px]';
  if (state === 'attention') {
    return (
      <span aria-hidden className={cx(place, 'grid grid-cols-[58fr_13fr_23fr] gap-[3%]')}>
        <span className="bg-ink-3" />
        <span className="bg-copper" />
        <span className="bg-trough-deep" />
      </span>
    );
  }
  const looks = {
    empty: 'border border-dotted border-rule-firm',
    ready: 'border border-rule-firm',
    stale: 'hatch border border-rule-firm',
    done: 'bg-ink-3',
  };
  return <span aria-hidden className={cx(place, looks[state])} />;
}
