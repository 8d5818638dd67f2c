import { useQuery } from '@tanstack/react-query';
import { useCallback, useMemo, useState } from 'react';
import { analytesOf, type AnalyteSummary, type Snapshot } from '#contract/snapshots.ts';
import type { Suite } from '#contract/suites.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { LinkButton } from '#src/components/ui/button.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Segmented } from '#src/components/ui/segmented.tsx';
import { suitesQuery } from '#src/lib/analysis-queries.ts';
import { snapshotQuery } from '#src/lib/deposit-queries.ts';
import { countOf } from '#src/lib/format.ts';
import { asOpening, inWords } from '#src/lib/number-words.ts';
import { stagePath } from '#src/lib/stages.ts';
import { urlOneOf, useUrlState } from '#src/lib/url-state.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { AnalytePlate, recommended } from './analyte-plate.tsx';
import { SuiteForm } from './suite-form.tsx';
import { SuiteList } from './suite-list.tsx';

type Support = Suite['support'];
const SUPPORTS: { value: Support; label: string }[] = [{ value: 'drill', label: 'Drill intervals' }, { value: 'surface', label: 'Surface samples' }];

const SUITE_VIEW = { support: urlOneOf(['drill', 'surface'], 'drill') };

const supportsOf = ({ rows, surfaceRows }: Snapshot): Support[] => SUPPORTS.map(({ value }) => value).filter((value) => (value === 'drill' ? rows > surfaceRows : surfaceRows > 0));

/** How the snapshot's analytes stand for one support, and what is made of them so far. */
export function suiteFinding(analytes: readonly AnalyteSummary[], support: Support, suites: readonly Suite[]): string {
  const fit = recommended(analytes).length;
  const care = analytes.filter(({ decision }) => decision === 'keep-with-care').length;
  const standing = suites.filter((suite) => suite.support === support).length;
  const made = standing === 0 ? 'No suite is made of them yet.' : `${asOpening(inWords(standing))} ${standing === 1 ? 'suite is' : 'suites are'} made of them.`;
  return `${fit} of ${countOf(analytes.length, 'analyte')} can bear log-ratios${care > 0 ? `, ${care} of them with care` : ''}. ${made}`;
}

/** Suite: which analytes the log-ratios are taken of. */
export function SuiteStage() {
  const depositId = useDepositId();
  const answer = useQuery(snapshotQuery(depositId));
  const suites = useQuery(suitesQuery(depositId));
  const error = answer.error ?? suites.error;
  if (error) return <><PageHead title="Suite" /><Problem error={error} action={{ label: 'Try again', run: () => void Promise.all([answer.refetch(), suites.refetch()]) }} /></>;
  if (!answer.data || !suites.data) return <><PageHead title="Suite" /><Loading /></>;
  const { snapshot } = answer.data;
  if (!snapshot || snapshot.analytes.length === 0) {
    const action = <LinkButton to={stagePath(depositId, 'intake')}>Go to intake</LinkButton>;
    return (
      <>
        <PageHead title="Suite" />
        <Plate title="Analytes" empty={<Empty action={action}>{answer.data.assembling ? 'The tables are being put together; their analytes are listed here in a moment.' : 'A suite is chosen from loaded analytes. Bring in assays or surface samples first.'}</Empty>} />
      </>
    );
  }
  return <Chooser key={snapshot.id} snapshot={snapshot} suites={suites.data} />;
}

function Chooser({ snapshot, suites }: { snapshot: Snapshot; suites: readonly Suite[] }) {
  const supports = supportsOf(snapshot);
  const [view, setView] = useUrlState(SUITE_VIEW);
  const support = supports.includes(view.support) ? view.support : (supports[0] ?? 'drill');
  const analytes = useMemo(() => analytesOf(snapshot.analytes, support), [snapshot, support]);
  const [picked, setPicked] = useState<Partial<Record<Support, string[]>>>({});
  const chosen = picked[support] ?? recommended(analytes);
  const choose = useCallback((names: string[]) => setPicked((before) => ({ ...before, [support]: names })), [support]);
  const views = supports.length > 1 && <Segmented label="Support" size="control" segments={SUPPORTS} value={support} onPick={(next) => setView({ support: next }, { push: true })} />;
  return (
    <>
      <PageHead title="Suite" finding={suiteFinding(analytes, support, suites)} actions={views} />
      <div className="grid gap-3 lg:grid-cols-[minmax(0,1fr)_20rem]">
        <AnalytePlate analytes={analytes} chosen={chosen} onChosen={choose} snapshotNumber={snapshot.number} />
        <div className="grid content-start gap-3">
          <SuiteForm key={`${support} ${suites.length}`} support={support} analytes={chosen} count={suites.length} />
          <SuiteList suites={suites} />
        </div>
      </div>
    </>
  );
}
