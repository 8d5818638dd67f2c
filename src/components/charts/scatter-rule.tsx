import { useId, useState } from 'react';
import type { FormEvent } from 'react';
import { Button } from '#src/components/ui/button.tsx';
import type { Category } from './chart-types.ts';
import type { SelectionRule } from './scatter-points.ts';

interface Props {
  xName: string;
  yName: string;
  categories: readonly Category[];
  onRule: (rule: SelectionRule) => void;
}

const FIELD = 'h-7 rounded-2 border border-rule-firm bg-sheet px-1.5 text-small text-ink';

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
      setError(`Expected a number for each limit, or nothing; found “${wrong ?? ''}”.`);
      return;
    }
    if ([xFrom, xTo, yFrom, yTo].every((bound) => bound === null) && category === '') {
      setError(`Write at least one limit${categories.length > 0 ? ', or choose a group' : ''}.`);
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
      className={`${FIELD} w-16 text-right`}
      value={limits[key]}
      onChange={(event) => setLimits({ ...limits, [key]: event.target.value })}
    />
  );
  return (
    <form onSubmit={submit} aria-label="Choose points by rule" className="flex flex-wrap items-center gap-x-3 gap-y-1 py-1 text-small text-ink-2">
      <span className="flex items-center gap-1">
        {xName} between {limit('xFrom', `${xName} from`)} and {limit('xTo', `${xName} to`)}
      </span>
      <span className="flex items-center gap-1">
        {yName} between {limit('yFrom', `${yName} from`)} and {limit('yTo', `${yName} to`)}
      </span>
      {categories.length > 0 && (
        <label className="flex items-center gap-1">
          in
          <select className={`${FIELD} chevron pr-7`} value={category} onChange={(event) => setCategory(event.target.value)}>
            <option value="">all groups</option>
            {categories.map(({ label }, index) => (
              <option key={index} value={index}>
                {label}
              </option>
            ))}
          </select>
        </label>
      )}
      <Button type="submit" size="tiny">
        Take points
      </Button>
      {error !== null && (
        <span id={errorId} role="alert" className="text-bad">
          {error}
        </span>
      )}
    </form>
  );
}
