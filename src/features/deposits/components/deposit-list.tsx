import { Link } from 'react-router-dom';
import type { DepositListRow } from '#contract/deposits.ts';
import { Chip } from '#src/components/ui/chip.tsx';
import { Run } from '#src/components/ui/run.tsx';
import { countOf, formatMetres } from '#src/lib/format.ts';
import { ROLE_NAMES } from '#src/lib/stages.ts';

/** Each deposit as a run of core, as long as its metres are against the longest. */
export function DepositList({ deposits }: { deposits: readonly DepositListRow[] }) {
  const longest = Math.max(1, ...deposits.map(({ metres }) => metres));
  return (
    <ul className="m-0 grid list-none gap-3 p-0">
      {deposits.map((deposit) => (
        <li key={deposit.id}>
          <DepositTray deposit={deposit} longest={longest} />
        </li>
      ))}
    </ul>
  );
}

/** Notches every 1,000 m, or every 10,000 where those would crowd. */
export function notchesOf(metres: number, longest: number): number[] {
  const step = longest > 40_000 ? 10_000 : 1000;
  return Array.from(
    { length: Math.floor(metres / step) },
    (_, index) => ((index + 1) * step) / longest,
  ).filter((share) => share < 0.999);
}

function DepositTray({ deposit, longest }: { deposit: DepositListRow; longest: number }) {
  const { id, name, description, isDemo, myRole, payAnalytes, holes, metres, finding } = deposit;
  return (
    <article className="relative grid gap-1 rounded-b-2 border border-t-2 border-rule border-t-ink-3 bg-sheet px-3.5 pt-2.5 pb-3 transition-colors hover:bg-trough/40">
      <div className="flex flex-wrap items-baseline gap-x-2.5 gap-y-1">
        <h2 className="font-read text-[1.125rem] leading-6 font-semibold">
          <Link
            to={`/deposits/${id}`}
            className="text-ink no-underline after:absolute after:inset-0 hover:text-copper"
          >
            {name}
          </Link>
        </h2>
        <span className="text-small text-ink-3">
          {payAnalytes.map(({ analyte }) => analyte).join(' ')}
        </span>
        {isDemo && <Chip tone="note">demonstration</Chip>}
        <span className="ml-auto text-small text-ink-2">
          you: {ROLE_NAMES[myRole].toLowerCase()}
        </span>
      </div>
      {(finding || description) && (
        <p className="max-w-[54rem] font-read text-finding text-ink-2">{finding || description}</p>
      )}
      <div className="mt-1 grid items-center gap-x-3 gap-y-1 md:grid-cols-[minmax(0,1fr)_11rem]">
        <Run
          label={`${name}, drilled`}
          parts={metres > 0 ? [{ share: metres / longest, label: formatMetres(metres) }] : []}
          notches={notchesOf(metres, longest)}
        />
        <p className="text-small text-ink-2">
          {metres > 0 ? (
            <>
              <span className="font-semibold text-ink">{formatMetres(metres)}</span> in{' '}
              {countOf(holes, 'hole')}
            </>
          ) : (
            'nothing loaded yet'
          )}
        </p>
      </div>
    </article>
  );
}
