import { Trash2 } from 'lucide-react';
import { deleteSuite, type Suite } from '#contract/suites.ts';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { countOf, formatFigures } from '#src/lib/format.ts';
import { notify, notifyProblem } from '#src/lib/toasts.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { useDeleteSuite } from '../api/suites-mutations.ts';

/** Suites chosen so far, each leading to its components. */
export function SuiteList({ suites }: { suites: readonly Suite[] }) {
  const depositId = useDepositId();
  const remove = useDeleteSuite(depositId);
  const refusal = useRefusal(deleteSuite);
  return (
    <Plate title="Suites" empty={suites.length === 0 ? <Empty>No suite is chosen yet. Tick analytes, give the suite a name, and go on to its components.</Empty> : undefined}>
      <ul className="grid gap-2">
        {suites.map((suite) => (
          <li key={suite.id} className="grid gap-1 border-b border-rule pb-2 last:border-0">
            <div className="flex flex-wrap items-baseline justify-between gap-x-3">
              <span className="font-medium">{suite.name}</span>
              <span className="text-caption text-ink-2">{countOf(suite.analytes.length, 'analyte')}, {suite.support === 'drill' ? 'drill intervals' : 'surface samples'}, {formatFigures(suite.replacementFraction, 2)} × limit</span>
            </div>
            <p className="text-caption text-ink-2">{suite.analytes.join(' ')}</p>
            {suite.note && <p className="text-small">{suite.note}</p>}
            <div className="flex gap-2">
              <LinkButton size="tiny" to={`/deposits/${depositId}/components?suite=${suite.id}`}>{suite.runs > 0 ? 'See its components' : 'Find its components'}</LinkButton>
              <Button size="tiny" kind="bare" icon={Trash2} unavailable={refusal ?? (suite.runs > 0 ? `${countOf(suite.runs, 'component run')} stand on it` : undefined)} onClick={() => remove.mutate(suite, { onSuccess: () => notify(`“${suite.name}” deleted`), onError: notifyProblem })}>Delete</Button>
            </div>
          </li>
        ))}
      </ul>
    </Plate>
  );
}
