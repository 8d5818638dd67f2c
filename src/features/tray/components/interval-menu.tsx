import { DropdownMenu } from 'radix-ui';
import { useMemo } from 'react';
import type { MenuPlace } from '#src/components/tray/tray-types.ts';
import { Icon } from '#src/components/ui/icon.tsx';
import type { MenuItem } from '#src/components/ui/menu.tsx';
import { countOf, formatInterval } from '#src/lib/format.ts';
import { takeRows } from '#src/lib/selection.ts';
import { runOfGroup, type TrayLayers } from '../tray-data.ts';

interface Props {
  layers: TrayLayers;
  row: number;
  place: MenuPlace;
  /** What the page can do with the interval. */
  more: readonly MenuItem[];
  onClose: () => void;
}

/** What can be done with one interval of core, opened where it lies. */
export function IntervalMenu({ layers, row, place, more, onClose }: Props) {
  const { frame } = layers;
  const items = useMemo(() => takeItems(layers, row), [layers, row]);
  const entry = ({ label, hint, run, icon, unavailable }: MenuItem, index: number) => (
    <DropdownMenu.Item key={index} disabled={unavailable !== undefined} onSelect={run} className="flex cursor-pointer items-start gap-2 rounded-2 px-2.5 py-1.5 text-small outline-none data-[disabled]:cursor-not-allowed data-[disabled]:text-ink-3 data-[highlighted]:bg-trough">
      {icon && <Icon icon={icon} size={14} />}
      <span>
        {label}
        {(unavailable ?? hint) && <span className="block text-caption text-ink-3">{unavailable ?? hint}</span>}
      </span>
    </DropdownMenu.Item>
  );
  return (
    <DropdownMenu.Root open modal={false} onOpenChange={(isOpen) => !isOpen && onClose()}>
      <DropdownMenu.Trigger asChild>
        <span aria-hidden className="fixed size-0" style={{ left: place.x, top: place.y }} />
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content side="top" align="start" collisionPadding={8} aria-label="Interval" className="opens z-40 max-w-80 min-w-48 rounded-3 border border-rule bg-sheet p-1 shadow-float">
          <DropdownMenu.Label className="px-2.5 pt-1 pb-1.5 text-caption text-ink-3">
            <span className="font-mono text-ink">{frame.holeAt(row)}</span> {formatInterval(frame.fromM[row] ?? NaN, frame.toM[row] ?? NaN)}
          </DropdownMenu.Label>
          {items.map(entry)}
          {more.length > 0 && <DropdownMenu.Separator className="my-1 border-t border-rule" />}
          {more.map(entry)}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}

/** Ways to take the interval and what belongs with it. */
function takeItems({ frame, grouping, columns }: TrayLayers, row: number): MenuItem[] {
  const items: MenuItem[] = [{ label: 'Take this interval', run: () => takeRows([row], 'taken in the tray') }];
  const label = columns?.label[row] ?? NaN;
  const group = grouping?.groups.find((candidate) => candidate.label === label);
  if (group !== undefined && columns !== null) {
    const run = runOfGroup(frame, columns.label, row);
    const all = () => Array.from(columns.label, (own, index) => (own === label ? index : -1)).filter((index) => index >= 0);
    items.push(
      { label: `Take its run of ${group.name}`, hint: countOf(run.length, 'interval'), run: () => takeRows(run, 'one run in the tray') },
      { label: `Take all of ${group.name}`, hint: countOf(group.intervals, 'interval'), run: () => takeRows(all(), 'one group') },
    );
  }
  const range = frame.rangeOf.get(frame.holeAt(row) ?? '');
  if (range !== undefined) {
    const rows = Array.from({ length: range.end - range.start }, (_value, i) => range.start + i);
    items.push({ label: 'Take the whole hole', hint: countOf(rows.length, 'interval'), run: () => takeRows(rows, 'one hole') });
  }
  return items;
}
