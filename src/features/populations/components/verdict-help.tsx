import { VERDICT_HELP, VERDICT_POWER, VERDICT_POWER_ROWS } from '#kernels/populations/verdict-power.ts';
import { formatCount } from '#src/lib/format.ts';

/** What the verdict says and how often it is right on generated truth. */
export function VerdictHelp() {
  return (
    <>
      <p>{VERDICT_HELP.text}</p>
      <details className="mt-1.5">
        <summary className="cursor-pointer text-copper underline underline-offset-2">How often it is right</summary>
        <p className="mt-1 text-caption text-ink-2">
          Generated data of known truth, {VERDICT_HELP.runs} sets each: % called mixed, and in brackets % called mixed or suspect. Separation in standard deviations of ln grade, share of the upper population.
        </p>
        <div className="mt-1 max-h-64 overflow-auto" tabIndex={0} role="region" aria-label="How often the verdict is right">
          <table className="w-full text-caption">
            <thead>
              <tr className="border-b border-rule-firm text-left">
                <th scope="col" className="py-0.5 pr-1 font-semibold">Truth</th>
                {VERDICT_POWER_ROWS.map((n) => <th key={n} scope="col" className="px-1 text-right font-semibold">n {formatCount(n)}</th>)}
              </tr>
            </thead>
            <tbody>
              {VERDICT_POWER.map(({ truth, mixed, flagged }) => (
                <tr key={truth} className="border-b border-rule">
                  <th scope="row" className="py-0.5 pr-1 text-left font-normal">{truth}</th>
                  {mixed.map((share, i) => <td key={VERDICT_POWER_ROWS[i]} className="px-1 text-right whitespace-nowrap">{share} ({flagged[i]})</td>)}
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      </details>
    </>
  );
}
