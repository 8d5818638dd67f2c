import { useId } from 'react';
import { HollowSlotDefs, markPaint, markPath, runFill, slotColours } from './category-marks.tsx';
import { captionText, LABEL_PX } from './chart-styles.ts';
import { ChartFrame } from './chart-frame.tsx';
import type { Box, ChartBasics } from './chart-types.ts';
import { RockPatternDefs, rockFill } from './rock-patterns.tsx';
import type { RockPattern } from './rock-patterns.tsx';
import { fitText, textWidth } from './text-width.ts';

export interface SharePart {
  label: string;
  share: number;
  /** A group or domain. */
  slot?: number | null;
  /** A logged rock. */
  pattern?: RockPattern | null;
}

export interface ShareRunProps extends ChartBasics {
  parts: readonly SharePart[];
  /** One run laid end to end with a key below, or a bar a part. */
  layout?: 'stacked' | 'bars';
}

const RUN_PX = 14;
const ROW_PX = 20;
const BAR_PX = 14;

export const shareText = (share: number) => {
  if (share > 0 && share < 0.005) return '<1\u2009%';
  return `${Math.round(share * 100)}\u2009%`;
};

/** Shares of metres as a run of core: groups in their colours, rocks in their patterns, others in ink. */
export function ShareRun(props: ShareRunProps) {
  const { parts, layout = 'stacked' } = props;
  const prefix = useId();
  const usualHeight = layout === 'stacked' ? RUN_PX + 8 + parts.length * ROW_PX : parts.length * ROW_PX;
  const patterns = parts.flatMap(({ pattern }) => (pattern === undefined || pattern === null ? [] : [pattern]));
  return (
    <ChartFrame {...props} usualHeight={Math.max(ROW_PX, usualHeight)}>
      {(box) => (
        <g>
          <RockPatternDefs prefix={prefix} patterns={[...new Set(patterns)]} />
          <HollowSlotDefs prefix={prefix} />
          {layout === 'stacked' ? <Stacked parts={parts} box={box} prefix={prefix} /> : <Bars parts={parts} box={box} prefix={prefix} />}
        </g>
      )}
    </ChartFrame>
  );
}

interface LayoutProps {
  parts: readonly SharePart[];
  box: Box;
  prefix: string;
}

function paintOf({ slot, pattern }: SharePart, prefix: string): { fill: string; stroke: string } {
  if (slot !== undefined && slot !== null) return { fill: runFill(slot, prefix), stroke: slotColours(slot).edge };
  if (pattern !== undefined) return { fill: rockFill(pattern, prefix), stroke: 'var(--rock-mark)' };
  return { fill: 'var(--ink-3)', stroke: 'var(--ink-3)' };
}

function Stacked({ parts, box, prefix }: LayoutProps) {
  const total = parts.reduce((sum, { share }) => sum + share, 0) || 1;
  const startOf = (index: number) => parts.slice(0, index).reduce((sum, { share }) => sum + share, 0) / total;
  return (
    <g>
      {parts.map((part, index) => (
        <rect key={part.label} x={0.5 + startOf(index) * (box.width - 1)} y={0.5} width={Math.max(0.5, (part.share / total) * (box.width - 1))} height={RUN_PX} {...paintOf(part, prefix)} strokeWidth={0.7} />
      ))}
      {parts.map((part, index) => (
        <g key={part.label} transform={`translate(0 ${RUN_PX + 8 + index * ROW_PX})`}>
          <Sample part={part} prefix={prefix} />
          <text x={24} y={ROW_PX / 2} dy="0.34em" style={{ ...captionText, fill: 'var(--ink-2)' }}>
            {fitText(part.label, box.width - 24 - 44, LABEL_PX)}
          </text>
          <text x={box.width - 1} y={ROW_PX / 2} dy="0.34em" textAnchor="end" style={{ ...captionText, fill: 'var(--ink)', fontVariantNumeric: 'tabular-nums' }}>
            {shareText(part.share)}
          </text>
        </g>
      ))}
    </g>
  );
}

function Sample({ part, prefix }: { part: SharePart; prefix: string }) {
  if (part.slot !== undefined && part.slot !== null) {
    return <path d={markPath(part.slot, 4.4)} transform={`translate(9 ${ROW_PX / 2})`} {...markPaint(part.slot)} />;
  }
  return <rect x={1} y={ROW_PX / 2 - 5} width={16} height={10} {...paintOf(part, prefix)} strokeWidth={0.6} />;
}

function Bars({ parts, box, prefix }: LayoutProps) {
  const widest = Math.max(0, ...parts.map(({ label }) => textWidth(label, LABEL_PX)));
  const words = Math.min(widest, box.width * 0.45);
  const room = Math.max(10, box.width - words - 8 - 40);
  const most = Math.max(1e-9, ...parts.map(({ share }) => share));
  const pitch = Math.min(26, box.height / Math.max(1, parts.length));
  return (
    <g>
      {parts.map((part, index) => {
        const wide = Math.max(1, (part.share / Math.max(most, 0.01)) * room);
        return (
          <g key={part.label} transform={`translate(0 ${index * pitch})`}>
            <text x={words} y={pitch / 2} dy="0.34em" textAnchor="end" style={{ ...captionText, fill: 'var(--ink-2)' }}>
              {fitText(part.label, words, LABEL_PX)}
            </text>
            <rect x={words + 8} y={pitch / 2 - BAR_PX / 2} width={wide} height={BAR_PX} {...paintOf(part, prefix)} strokeWidth={0.7} />
            <text x={words + 8 + wide + 6} y={pitch / 2} dy="0.34em" style={captionText}>
              {shareText(part.share)}
            </text>
          </g>
        );
      })}
    </g>
  );
}
