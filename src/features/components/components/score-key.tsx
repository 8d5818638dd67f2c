import { formatFigures } from '#src/lib/format.ts';

interface Props {
  pc: string;
  limits: readonly number[];
}

const STOPS = [1, 2, 3, 4, 5, 6];

/** Six colours of the score with the limits between them. */
export function ScoreKey({ pc, limits }: Props) {
  return (
    <div role="img" aria-label={`Colours: six classes of ${pc}, as many rows in each, parted at ${limits.map((limit) => formatFigures(limit, 2)).join(', ')}`} className="flex items-start gap-1.5 pb-3 pl-10 text-tick text-ink-3">
      <span className="leading-3">low</span>
      <span className="flex">
        {STOPS.map((stop, index) => (
          <span key={stop} className="relative block w-9">
            <span className="block h-2.5 border-y border-ink-3" style={{ background: `var(--s${stop})` }} />
            {index < limits.length && <span className="absolute top-2.5 right-0 translate-x-1/2">{formatFigures(limits[index] ?? NaN, 2)}</span>}
          </span>
        ))}
      </span>
      <span className="leading-3">high</span>
    </div>
  );
}
