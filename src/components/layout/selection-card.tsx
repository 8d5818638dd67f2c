import { X } from 'lucide-react';
import type { ReactNode } from 'react';
import { IconButton } from '#src/components/ui/icon-button.tsx';
import { formatCount } from '#src/lib/format.ts';
import { CardSlot } from './slots.tsx';

interface Props {
  count: number;
  /** "intervals" */
  unit: string;
  /** Metres, holes and how it was taken: "72.0 m in 23 holes · drawn by lasso". */
  detail: ReactNode;
  onClear: () => void;
  /** `CardPart`s. */
  children?: ReactNode;
  /** Wide buttons at the foot, main action first. */
  actions?: ReactNode;
}

/** What is selected, and what can be done with it. Render it only while something is. */
export function SelectionCard({ count, unit, detail, onClear, children, actions }: Props) {
  return (
    <CardSlot>
      <aside
        aria-label="Selection"
        className="flex h-full flex-col border-rule bg-sheet max-lg:max-h-[40dvh] max-lg:border-t lg:w-64 lg:border-l"
      >
        <div
          role="group"
          aria-label="What is selected, scrolls"
          tabIndex={0}
          className="grid min-h-0 flex-1 content-start gap-2.5 overflow-auto px-3.5 py-3"
        >
          <div className="flex items-center gap-2">
            <h2 className="flex-1 text-head">Selection</h2>
            <IconButton icon={X} label="Clear the selection" onClick={onClear} />
          </div>
          <div aria-live="polite">
            <p>
              <span className="font-read text-big">{formatCount(count)}</span> {unit}
            </p>
            <p className="text-body text-ink-3">{detail}</p>
          </div>
          {children}
        </div>
        {actions && (
          <div className="grid flex-none gap-1.5 border-t border-rule px-3.5 py-2.5 empty:hidden">
            {actions}
          </div>
        )}
      </aside>
    </CardSlot>
  );
}

export function CardPart({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="grid gap-1">
      <h3 className="text-caption font-semibold text-ink-3">{title}</h3>
      {children}
    </section>
  );
}

interface FactsProps {
  facts: readonly { term: ReactNode; value: ReactNode; isMono?: boolean }[];
}

/** Terms at the left, figures at the right. */
export function Facts({ facts }: FactsProps) {
  return (
    <dl className="m-0 grid grid-cols-[1fr_auto] content-start gap-x-2 gap-y-0.5 text-small">
      {facts.map(({ term, value, isMono }, index) => (
        <div key={index} className="contents">
          <dt className={`min-w-0 text-ink-2 ${isMono ? 'font-mono text-caption' : ''}`}>{term}</dt>
          <dd className="m-0 text-right">{value}</dd>
        </div>
      ))}
    </dl>
  );
}
