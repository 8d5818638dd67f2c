import { captionText, LABEL_PX } from './chart-styles.ts';
import { textWidth } from './text-width.ts';

export interface LineSample {
  label: string;
  stroke?: string;
  dash?: string;
  /** A filled swatch instead of a line. */
  swatch?: string;
}

const SAMPLE_PX = 22;
const GAP_PX = 16;
const ROW_PX = 17;

/** Where each entry falls when laid in rows of the given width. */
export function legendFlow(labels: readonly string[], widthPx: number): { x: number; row: number }[] {
  let x = 0;
  let row = 0;
  return labels.map((label) => {
    const wide = SAMPLE_PX + 6 + textWidth(label, LABEL_PX);
    if (x > 0 && x + wide > widthPx) {
      x = 0;
      row++;
    }
    const place = { x, row };
    x += wide + GAP_PX;
    return place;
  });
}

export function legendHeight(labels: readonly string[], widthPx: number): number {
  const last = legendFlow(labels, widthPx).at(-1);
  return last === undefined ? 0 : (last.row + 1) * ROW_PX + 2;
}

/** Line samples with their words, inside the drawing so that an export keeps them. */
export function SvgLegend({ samples, x, y, width }: { samples: readonly LineSample[]; x: number; y: number; width: number }) {
  const places = legendFlow(samples.map(({ label }) => label), width);
  return (
    <g transform={`translate(${x} ${y})`}>
      {samples.map(({ label, stroke = 'var(--ink)', dash, swatch }, index) => {
        const { x: dx, row } = places[index] ?? { x: 0, row: 0 };
        return (
          <g key={label} transform={`translate(${dx} ${row * ROW_PX + 8})`}>
            {swatch === undefined ? (
              <line x1={0} x2={SAMPLE_PX} y1={0} y2={0} stroke={stroke} strokeWidth={1.7} strokeDasharray={dash} />
            ) : (
              <rect x={4} y={-5} width={SAMPLE_PX - 8} height={10} fill={swatch} />
            )}
            <text x={SAMPLE_PX + 6} y={0} dy="0.35em" style={{ ...captionText, fill: 'var(--ink-2)' }}>
              {label}
            </text>
          </g>
        );
      })}
    </g>
  );
}
