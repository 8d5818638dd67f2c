import { ToggleGroup } from 'radix-ui';
import type { ReactNode } from 'react';
import { cx } from '#src/lib/cx.ts';

interface Segment<Value extends string> {
  value: Value;
  label: ReactNode;
}

interface Props<Value extends string> {
  /** What is being chosen, for screen readers. */
  label: string;
  segments: readonly Segment<Value>[];
  value: Value;
  onPick: (value: Value) => void;
  /** `control`: as high as a button, for views of a page. */
  size?: 'tiny' | 'control';
}

/** One of a few views or tools, side by side. */
export function Segmented<Value extends string>({
  label,
  segments,
  value,
  onPick,
  size = 'tiny',
}: Props<Value>) {
  const pick = (picked: string) => {
    const segment = segments.find((candidate) => candidate.value === picked);
    if (segment) onPick(segment.value);
  };
  return (
    <ToggleGroup.Root
      type="single"
      aria-label={label}
      value={value}
      onValueChange={pick}
      className="inline-flex max-w-full overflow-x-auto rounded-2 border border-rule-firm bg-sheet"
    >
      {segments.map((segment) => (
        <ToggleGroup.Item
          key={segment.value}
          value={segment.value}
          className={cx(
            'border-0 border-r border-rule bg-transparent px-2 text-small leading-none font-medium whitespace-nowrap text-ink-2 last:border-r-0 hover:bg-trough focus-visible:-outline-offset-2 data-[state=on]:bg-ink data-[state=on]:text-paper max-md:h-9',
            size === 'tiny' ? 'h-6' : 'h-7 px-3',
          )}
        >
          {segment.label}
        </ToggleGroup.Item>
      ))}
    </ToggleGroup.Root>
  );
}
