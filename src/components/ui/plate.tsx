import { Download } from 'lucide-react';
import { useId, type ReactNode } from 'react';
import { cx } from '#src/lib/cx.ts';
import { useDelayed } from '#src/lib/use-delayed.ts';
import { formatShare } from '#src/lib/format.ts';
import { Button } from './button.tsx';
import { Chip } from './chip.tsx';
import { HelpButton, type HelpText } from './help.tsx';
import { IconButton } from './icon-button.tsx';
import { Menu, type MenuItem } from './menu.tsx';
import { Problem } from './problem.tsx';
import { ProgressRun } from './run.tsx';

export interface PlateBusy {
  /** 0 to 1; null when not known. */
  progress: number | null;
  phase?: string;
  onCancel?: () => void;
}

interface Props {
  title: string;
  /** Caption type beside the title: scale, centre, support. */
  qualifier?: ReactNode;
  /** Between title and icons: a segmented control, a verdict. */
  tools?: ReactNode;
  /** Ways to take it away: SVG, PNG, CSV. */
  exports?: readonly MenuItem[];
  help?: HelpText;
  /** n, support, method, snapshot. Every plot has one. */
  caption?: ReactNode;
  /** Why it is stale, as a chip: "on snapshot 13". */
  stale?: string | false | null;
  error?: unknown;
  onRetry?: () => void;
  /** Work under way; what was drawn stays, pale. */
  busy?: PlateBusy | false | null;
  /** Shown instead of the children when there is nothing to draw. */
  empty?: ReactNode;
  /** `signing`: the one plate that asks for a signature. */
  tone?: 'plain' | 'signing';
  /** No inner padding: tables and plots that draw to the edge. */
  isFlush?: boolean;
  className?: string;
  children?: ReactNode;
}

/** A sheet hanging from a firm rule: one picture, table or form with its title and its caption. */
export function Plate(props: Props) {
  const {
    title,
    qualifier,
    tools,
    exports,
    help,
    caption,
    stale,
    error,
    onRetry,
    busy,
    empty,
    tone = 'plain',
    isFlush,
    className,
    children,
  } = props;
  const id = useId();
  const isBusyShown = useDelayed(Boolean(busy), 300);
  return (
    <section
      aria-labelledby={id}
      aria-busy={Boolean(busy) || undefined}
      className={cx(
        'relative flex min-w-0 flex-col rounded-b-2 border border-t-2 border-rule bg-sheet',
        tone === 'signing' ? 'border-t-copper' : 'border-t-ink-3',
        className,
      )}
    >
      {stale && (
        <span aria-hidden className="hatch absolute inset-x-[-1px] -top-0.5 h-[5px] bg-sheet" />
      )}
      {isBusyShown && busy && (
        <div className="absolute inset-x-[-1px] -top-0.5">
          <ProgressRun value={busy.progress} label={`${title}: ${busy.phase ?? 'at work'}`} />
        </div>
      )}
      <header className="flex min-h-[30px] items-center gap-x-2 gap-y-1 px-3 pt-[5px] pr-2 pb-[3px] max-md:flex-wrap">
        <div className="flex min-w-0 flex-1 flex-wrap items-center gap-x-2 max-md:basis-1/2">
          <h2 id={id} className="text-body font-semibold">
            {title}
          </h2>
          {qualifier && <span className="min-w-0 text-caption text-ink-3">{qualifier}</span>}
          {stale && <Chip tone="stale">stale: {stale}</Chip>}
        </div>
        {tools && (
          <div className="flex shrink-0 flex-wrap items-center gap-2 max-md:max-w-full">
            {tools}
          </div>
        )}
        {exports && exports.length > 0 && (
          <Menu
            trigger={<IconButton icon={Download} label={`Download: ${title}`} />}
            groups={[{ items: exports }]}
          />
        )}
        {help && <HelpButton subject={title} help={help} />}
      </header>
      <div className="relative flex min-h-0 min-w-0 flex-1 flex-col">
        {isBusyShown && busy && <BusyLine busy={busy} />}
        <div
          className={cx(
            'min-h-0 min-w-0 flex-1 transition-opacity',
            !isFlush && 'px-3 pb-2',
            isBusyShown && 'opacity-40',
          )}
        >
          {error ? (
            <Problem
              error={error}
              {...(onRetry ? { action: { label: 'Try again', run: onRetry } } : {})}
            />
          ) : (
            (empty ?? children)
          )}
        </div>
      </div>
      {caption && (
        <footer className="border-t border-dotted border-rule px-3 pt-1 pb-1.5 text-caption text-ink-3">
          {caption}
        </footer>
      )}
    </section>
  );
}

/** Over one second: what it is at, how far, and the way out. */
function BusyLine({ busy }: { busy: PlateBusy }) {
  const isLong = useDelayed(true, 700);
  if (!isLong) return null;
  return (
    <div className="absolute top-0 right-3 z-10 flex items-center gap-2 rounded-2 border border-rule bg-sheet py-1 pr-1 pl-2 text-caption text-ink-2">
      {busy.phase ?? 'at work'}
      {busy.progress !== null && `, ${formatShare(busy.progress)}`}
      {busy.onCancel && (
        <Button size="tiny" onClick={busy.onCancel}>
          Cancel
        </Button>
      )}
    </div>
  );
}
