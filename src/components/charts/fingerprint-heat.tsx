import { useState } from 'react';
import { CategoryHead } from './fingerprint-head.tsx';
import { captionText, halo, LABEL_PX, tickText, TICK_PX } from './chart-styles.ts';
import { ChartFrame } from './chart-frame.tsx';
import type { Box, Category, ChartBasics } from './chart-types.ts';
import { textWidth } from './text-width.ts';

export interface FingerprintProps extends ChartBasics {
  groups: readonly Category[];
  elements: readonly string[];
  /** values[group][element], 0 at the centre; NaN where there is none. */
  values: readonly (readonly number[])[];
  /** Value at which the outermost step begins; the 96th percentile of |value| when absent. */
  reach?: number;
  /** What lies at the two ends of the scale. */
  lowWord?: string;
  highWord?: string;
  selectedGroup?: number | null;
  onGroup?: (group: number) => void;
}

const STEPS = 9;
const ROW_PX = 17;
const LEGEND_PX = 24;
/** A column narrower than this cannot be read: the least telling elements give way. */
const LEAST_COLUMN_PX = 11;
/** Names lean over columns at least so wide; over narrower ones they stand. */
const UPRIGHT_BELOW_PX = 14;

/** Step 1 to 9 of the diverging scale; 5 holds the centre, 1 and 9 lie beyond `reach`. */
export function divergingStep(value: number, reach: number): number {
  const away = Math.min(4, Math.round((Math.abs(value) / reach) * 3.5));
  return 5 + Math.sign(value) * away;
}

/** The sign written in a cell of the outer two steps at either end. */
export function stepSign(step: number): string {
  if (step <= 2) return '\u2212';
  return step >= STEPS - 1 ? '+' : '';
}

function usualReach(values: readonly (readonly number[])[]): number {
  const sizes = values.flat().filter(Number.isFinite).map(Math.abs).sort((a, b) => a - b);
  return sizes[Math.floor((sizes.length - 1) * 0.96)] || 1;
}

/** Rows from richest to poorest in one element. */
export function rowOrder(groups: readonly Category[], values: readonly (readonly number[])[], byElement: number | null): number[] {
  const order = groups.map((_group, index) => index);
  if (byElement === null) return order;
  const value = (index: number) => values[index]?.[byElement] ?? -Infinity;
  return order.sort((a, b) => value(b) - value(a));
}

/** The elements that fit, those that part the groups most, in the order given. */
export function tellingElements(elements: readonly string[], values: readonly (readonly number[])[], count: number): number[] {
  const all = elements.map((_name, col) => col);
  if (count >= elements.length) return all;
  const reachOf = (col: number) => Math.max(0, ...values.map((row) => Math.abs(row[col] ?? 0)).filter(Number.isFinite));
  const kept = new Set([...all].sort((a, b) => reachOf(b) - reachOf(a)).slice(0, count));
  return all.filter((col) => kept.has(col));
}

/** Group by element medians against a stated centre, brown poorer, green richer, outer steps signed. */
export function FingerprintHeat(props: FingerprintProps) {
  const { groups, elements, values, lowWord = 'poorer', highWord = 'richer than the whole' } = props;
  const [byElement, setByElement] = useState<number | null>(null);
  const reach = props.reach ?? usualReach(values);
  const rows = rowOrder(groups, values, byElement);
  const widestHead = Math.max(...elements.map((name) => textWidth(name, TICK_PX)));
  const left = 26 + Math.max(40, ...groups.map(({ label }) => textWidth(label, LABEL_PX)));
  return (
    <ChartFrame {...props} usualHeight={20 + groups.length * ROW_PX + LEGEND_PX} interactive>
      {(box) => {
        const cols = tellingElements(elements, values, Math.max(4, Math.floor((box.width - left - 2) / LEAST_COLUMN_PX)));
        const width = (box.width - left - 2) / Math.max(1, cols.length);
        const note = cols.length < elements.length ? `${cols.length} of ${elements.length} analytes, those that part the groups most` : null;
        const legendPx = note === null ? LEGEND_PX : LEGEND_PX + 15;
        const isSteep = widestHead > width - 2;
        const turn = !isSteep ? 0 : width < UPRIGHT_BELOW_PX ? 90 : 60;
        const head = turn === 0 ? 20 : Math.ceil(widestHead * (turn === 90 ? 1 : 0.82)) + 10;
        const height = Math.max(12, Math.min(26, (box.height - head - legendPx) / Math.max(1, groups.length)));
        const cell = { width, height };
        return (
          <g>
            {cols.map((col, place) => (
              <ColumnHead
                key={col}
                x={left + (place + 0.5) * cell.width}
                width={cell.width}
                height={head}
                turn={turn}
                name={elements[col] ?? ''}
                isSorted={byElement === col}
                onSort={() => setByElement(byElement === col ? null : col)}
              />
            ))}
            {rows.map((group, at) => (
              <g key={group} transform={`translate(0 ${head + at * cell.height})`}>
                <CategoryHead
                  category={groups[group]}
                  height={cell.height}
                  maxPx={left - 24}
                  isChosen={props.selectedGroup === group}
                  onClick={props.onGroup === undefined ? undefined : () => props.onGroup?.(group)}
                />
                {cols.map((col, place) => (
                  <Cell key={col} x={left + place * cell.width} {...cell} value={values[group]?.[col] ?? NaN} reach={reach} />
                ))}
              </g>
            ))}
            <ScaleLegend box={box} left={left} top={head + groups.length * cell.height + 6} words={[lowWord, highWord]} />
            {note !== null && (
              <text x={0} y={head + groups.length * cell.height + LEGEND_PX + 9} style={tickText}>
                {note}
              </text>
            )}
          </g>
        );
      }}
    </ChartFrame>
  );
}

function Cell({ x, width, height, value, reach }: Box & { x: number; value: number; reach: number }) {
  if (!Number.isFinite(value)) {
    return <rect x={x + 0.5} y={0.5} width={width - 1} height={height - 1} fill="none" stroke="var(--rule)" strokeDasharray="2 2" />;
  }
  const step = divergingStep(value, reach);
  const sign = stepSign(step);
  return (
    <g>
      <rect x={x + 0.5} y={0.5} width={Math.max(1, width - 1)} height={height - 1} fill={`var(--d${step})`} />
      {sign !== '' && width >= 8 && (
        <text x={x + width / 2} y={height / 2} dy="0.34em" textAnchor="middle" style={{ ...tickText, fontWeight: 600, fill: signInk(step) }}>
          {sign}
        </text>
      )}
    </g>
  );
}

/** Signs read on their cell in both themes: the sheet on the deepest step, near black on the next. */
const signInk = (step: number) => (step === 1 || step === STEPS ? 'var(--sheet)' : 'var(--on-c)');

interface HeadProps {
  x: number;
  width: number;
  height: number;
  /** Degrees the name is turned by, from level. */
  turn: 0 | 60 | 90;
  name: string;
  isSorted: boolean;
  onSort: () => void;
}

function ColumnHead({ x, width, height, turn, name, isSorted, onSort }: HeadProps) {
  return (
    <g
      role="button"
      tabIndex={0}
      aria-pressed={isSorted}
      aria-label={isSorted ? `Groups as given, not by ${name}` : `Order groups by ${name}, richest first`}
      style={{ cursor: 'pointer' }}
      onClick={onSort}
      onKeyDown={(event) => {
        if (event.key === 'Enter' || event.key === ' ') {
          event.preventDefault();
          onSort();
        }
      }}
    >
      <rect x={x - width / 2} y={0} width={width} height={height - 2} fill="transparent" />
      <text
        transform={turn === 0 ? `translate(${x} 13)` : `translate(${x + 4} ${height - 5}) rotate(-${turn})`}
        textAnchor={turn === 0 ? 'middle' : 'start'}
        style={{ ...tickText, ...(isSorted ? { fill: 'var(--ink)', fontWeight: 600 } : {}) }}
      >
        {name}
      </text>
      {isSorted && <line x1={x - width / 2 + 1} x2={x + width / 2 - 1} y1={height - 2} y2={height - 2} stroke="var(--ink)" strokeWidth={1.5} />}
    </g>
  );
}

function ScaleLegend({ box, left, top, words }: { box: Box; left: number; top: number; words: readonly [string, string] }) {
  const [low, high] = words;
  const lowPx = textWidth(low, LABEL_PX);
  const step = Math.max(6, Math.min(20, (box.width - lowPx - textWidth(high, LABEL_PX) - 24) / STEPS));
  const start = Math.max(lowPx + 6, Math.min(left, box.width - STEPS * step - textWidth(high, LABEL_PX) - 8));
  return (
    <g>
      <text x={start - 5} y={top + 9} textAnchor="end" style={{ ...captionText, ...halo }}>
        {low}
      </text>
      {Array.from({ length: STEPS }, (_value, i) => (
        <rect key={i} x={start + i * step} y={top + 1} width={step - 0.5} height={8} fill={`var(--d${i + 1})`} />
      ))}
      <text x={start + STEPS * step + 5} y={top + 9} style={{ ...captionText, ...halo }}>
        {high}
      </text>
    </g>
  );
}
