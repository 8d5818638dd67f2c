import { captionText } from './chart-styles.ts';
import type { NetLine, Sureness } from './stereonet-marks.ts';

interface Props {
  x: number;
  y: number;
  width: number;
  lines: readonly NetLine[];
  meanPlane: { dip: number; dipDirection: number } | null;
  cone95: number | null;
}

const ROW_PX = 18;
const ORDER: readonly Sureness[] = ['sure', 'moderate', 'unsure'];

/** "34 / 358": dip and dip direction in whole degrees. */
export function planeText({ dip, dipDirection }: { dip: number; dipDirection: number }): string {
  const direction = ((Math.round(dipDirection) % 360) + 360) % 360;
  return `${Math.round(dip)}\u2009/\u2009${String(direction).padStart(3, '0')}`;
}

/** Marks with their counts, the mean plane and its cone. */
export function StereonetKey({ x, y, width, lines, meanPlane, cone95 }: Props) {
  const counts = ORDER.map((sureness) => ({ sureness, count: lines.filter((line) => line.sureness === sureness).length })).filter(({ count }) => count > 0);
  const rows = [
    ...counts.map(({ sureness, count }) => ({ mark: sureness, word: sureness, value: String(count) })),
    ...(meanPlane === null ? [] : [{ mark: 'mean' as const, word: 'mean', value: planeText(meanPlane) }]),
    ...(cone95 === null ? [] : [{ mark: 'cone' as const, word: 'cone 95\u2009%', value: `±\u2009${cone95 < 10 ? cone95.toFixed(1) : Math.round(cone95)}°` }]),
  ];
  return (
    <g>
      {rows.map(({ mark, word, value }, index) => (
        <g key={word} transform={`translate(${x} ${y + index * ROW_PX})`}>
          <KeyMark mark={mark} />
          <text x={18} y={0} dy="0.35em" style={{ ...captionText, fill: 'var(--ink-2)' }}>
            {word}
          </text>
          <text x={width} y={0} dy="0.35em" textAnchor="end" style={{ ...captionText, fill: 'var(--ink)', fontVariantNumeric: 'tabular-nums' }}>
            {value}
          </text>
        </g>
      ))}
    </g>
  );
}

function KeyMark({ mark }: { mark: Sureness | 'mean' | 'cone' }) {
  if (mark === 'sure') return <circle cx={6} cy={0} r={2.8} fill="var(--ink)" />;
  if (mark === 'moderate') return <circle cx={6} cy={0} r={2.6} fill="var(--sheet)" stroke="var(--ink-2)" />;
  if (mark === 'unsure') return <path d="M3.5-2.5l5 5M8.5-2.5l-5 5" stroke="var(--ink-3)" strokeWidth={1.2} />;
  return <line x1={0} x2={12} y1={0} y2={0} stroke="var(--copper)" strokeWidth={mark === 'mean' ? 1.8 : 1.2} strokeDasharray={mark === 'mean' ? undefined : '3 2'} />;
}
