import { useId, useState } from 'react';
import type { FormEvent } from 'react';
import type { Category } from './chart-types.ts';
import type { SelectionRule } from './scatter-points.ts';

interface Props {
  xName: string;
  yName: string;
  categories: readonly Category[];
  onRule: (rule: SelectionRule) => void;
}

const FIELD_STYLE = { borderColor: 'var(--rule-firm)', background: 'var(--sheet)', color: 'var(--ink)', font: 'var(--t-small)' };
const FIELD_CLASS = 'h-7 rounded border px-1.5';

/** An empty limit is open; a comma counts as a decimal point. `undefined` is not a number. */
export function readLimit(text: string): number | null | undefined {
  const tidy = text.trim().replace('\u2212', '-').replace(',', '.');
  if (tidy === '') return null;
  const value = Number(tidy);
  return Number.isFinite(value) ? value : undefined;
}

/** Choosing points without a drag: limits on both axes and a category. */
export function ScatterRule({ xName, yName, categories, onRule }: Props) {
  const [limits, setLimits] = useState({ xFrom: '', xTo: '', yFrom: '', yTo: '' });
  const [category, setCategory] = useState('');
  const [error, setError] = useState<string | null>(null);
  const errorId = useId();
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const [xFrom, xTo, yFrom, yTo] = [limits.xFrom, limits.xTo, limits.yFrom, limits.yTo].map(readLimit);
    if (xFrom === undefined || xTo === undefined || yFrom === undefined || yTo === undefined) {
      const wrong = Object.values(limits).find((text) => readLimit(text) === undefined);
      setError(`Expected a number for each limit, or nothing; found "${wrong ?? ''}".`);
      return;
    }
    setError(null);
    onRule({ x: [xFrom, xTo], y: [yFrom, yTo], category: category === '' ? null : Number(category) });
  };
  const limit = (key: keyof typeof limits, label: string) => (
    <input
      aria-label={label}
      aria-describedby={error === null ? undefined : errorId}
      inputMode="decimal"
      className={`${FIELD_CLASS} w-16 text-right`}
      style={FIELD_STYLE}
      value={limits[key]}
      onChange={(event) => setLimits({ ...limits, [key]: event.target.value })}
    />
  );
  return (
    <form onSubmit={submit} aria-label="Choose points by rule" className="flex flex-wrap items-center gap-x-3 gap-y-1 py-1" style={{ font: 'var(--t-small)', color: 'var(--ink-2)' }}>
      <span className="flex items-center gap-1">
        {xName} between {limit('xFrom', `${xName} from`)} and {limit('xTo', `${xName} to`)}
      </span>
      <span className="flex items-center gap-1">
        {yName} between {limit('yFrom', `${yName} from`)} and {limit('yTo', `${yName} to`)}
      </span>
      {categories.length > 0 && (
        <label className="flex items-center gap-1">
          in
          <select className={FIELD_CLASS} style={FIELD_STYLE} value={category} onChange={(event) => setCategory(event.target.value)}>
            <option value="">all groups</option>
            {categories.map(({ label }, index) => (
              <option key={index} value={index}>
                {label}
              </option>
            ))}
          </select>
        </label>
      )}
      <button type="submit" className="h-7 cursor-pointer rounded border px-2 hover:bg-(--trough)" style={{ ...FIELD_STYLE, font: '500 0.8125rem/1 var(--font-ui)' }}>
        Take points
      </button>
      {error !== null && (
        <span id={errorId} role="alert" style={{ color: 'var(--bad)' }}>
          {error}
        </span>
      )}
    </form>
  );
}
