import { Trash2 } from 'lucide-react';
import { deleteSuite, updateSuite, type Suite } from '#contract/suites.ts';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { EditableName } from '#src/components/ui/editable-name.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { countOf, formatFigures } from '#src/lib/format.ts';
import { stagePath } from '#src/lib/stages.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { useDeleteSuite, useRenameSuite } from '../api/suites-mutations.ts';

/** Suites made so far, each leading to its components. */
export function SuiteList({ suites }: { suites: readonly Suite[] }) {
  return (
    <Plate title="Suites" qualifier={countOf(suites.length, 'suite')} empty={suites.length === 0 ? <Empty>No suite is made yet. Tick analytes, give the suite a name, and go on to its components.</Empty> : undefined}>
      <ul className="grid gap-2">
        {suites.map((suite) => (
          <SuiteEntry key={suite.id} suite={suite} />
        ))}
      </ul>
    </Plate>
  );
}

function SuiteEntry({ suite }: { suite: Suite }) {
  const depositId = useDepositId();
  const remove = useDeleteSuite(depositId);
  const rename = useRenameSuite(depositId);
  const [renameRefusal, deleteRefusal] = [useRefusal(updateSuite), useRefusal(deleteSuite)];
  const standing = suite.runs > 0 ? `${countOf(suite.runs, 'component run')} ${suite.runs === 1 ? 'stands' : 'stand'} on it` : undefined;
  return (
    <li className="grid gap-1 border-b border-rule pb-2 last:border-0">
      <EditableName name={suite.name} refusal={renameRefusal} onRename={(name) => rename.mutate({ suite, name })} />
      <p className="text-caption text-ink-3">
        {countOf(suite.analytes.length, 'analyte')}, {suite.support === 'drill' ? 'drill intervals' : 'surface samples'}, {formatFigures(suite.replacementFraction, 2)} × limit
      </p>
      <p className="text-caption text-ink-2">{suite.analytes.join(' ')}</p>
      {suite.note && <p className="text-small">{suite.note}</p>}
      <div className="flex gap-2">
        <LinkButton size="tiny" to={`${stagePath(depositId, 'components')}?suite=${suite.id}`}>
          {suite.runs > 0 ? 'See its components' : 'Find its components'}
        </LinkButton>
        <Button
          size="tiny"
          kind="bare"
          icon={Trash2}
          unavailable={deleteRefusal ?? standing}
          isBusy={remove.isPending}
          onClick={() => remove.mutate(suite)}
        >
          Delete
        </Button>
      </div>
    </li>
  );
}
