import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { Snapshot } from '#contract/snapshots.ts';
import type { Suite } from '#contract/suites.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { LinkButton } from '#src/components/ui/button.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Segmented } from '#src/components/ui/segmented.tsx';
import { suitesQuery } from '#src/lib/analysis-queries.ts';
import { snapshotQuery } from '#src/lib/deposit-queries.ts';
import { countOf } from '#src/lib/format.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { AnalytePlate, recommended } from './analyte-plate.tsx';
import { SuiteForm } from './suite-form.tsx';
import { SuiteList } from './suite-list.tsx';

type Support = Suite['support'];
const SUPPORTS: { value: Support; label: string }[] = [{ value: 'drill', label: 'Drill intervals' }, { value: 'surface', label: 'Surface samples' }];

const supportsOf = ({ rows, surfaceRows }: Snapshot): Support[] => SUPPORTS.map(({ value }) => value).filter((value) => (value === 'drill' ? rows > surfaceRows : surfaceRows > 0));

function findingOf({ analytes }: Snapshot, suites: readonly Suite[]): string {
  const fit = recommended(analytes).length;
  const standing = suites.length === 0 ? 'No suite is chosen yet.' : `${countOf(suites.length, 'suite')} ${suites.length === 1 ? 'is' : 'are'} chosen.`;
  return `${fit} of ${countOf(analytes.length, 'analyte')} can bear log-ratios; the others are mostly below detection, missing, or lost by the digestion. ${standing}`;
}

/** Suite: which analytes the log-ratios are taken of. */
export function SuiteStage() {
  const depositId = useDepositId();
  const answer = useQuery(snapshotQuery(depositId));
  const suites = useQuery(suitesQuery(depositId));
  if (!answer.data || !suites.data) return <><PageHead title="Suite" /><Skeleton lines={10} /></>;
  const { snapshot } = answer.data;
  if (!snapshot || snapshot.analytes.length === 0) {
    return (
      <>
        <PageHead title="Suite" />
        <Plate title="Analytes" empty={<Empty action={<LinkButton to={`/deposits/${depositId}/intake`}>Go to Intake</LinkButton>}>A suite is chosen from loaded analytes. Bring in assays or surface samples first.</Empty>} />
      </>
    );
  }
  return (
    <>
      <PageHead title="Suite" finding={findingOf(snapshot, suites.data)} />
      <Chooser key={snapshot.id} snapshot={snapshot} suites={suites.data} />
    </>
  );
}

function Chooser({ snapshot, suites }: { snapshot: Snapshot; suites: readonly Suite[] }) {
  const supports = supportsOf(snapshot);
  const [support, setSupport] = useState<Support>(supports[0] ?? 'drill');
  const analytes = snapshot.analytes.filter(({ supports: own }) => own.includes(support));
  const [chosen, setChosen] = useState<string[]>(() => recommended(analytes));
  const known = chosen.filter((analyte) => analytes.some((other) => other.analyte === analyte));
  return (
    <div className="grid gap-3 lg:grid-cols-[minmax(0,1fr)_22rem]">
      <div className="grid min-w-0 content-start gap-3">
        {supports.length > 1 && <div className="justify-self-start"><Segmented label="Support" segments={SUPPORTS} value={support} onPick={setSupport} /></div>}
        <AnalytePlate analytes={analytes} chosen={new Set(known)} onChosen={setChosen} snapshotNumber={snapshot.number} />
      </div>
      <div className="grid content-start gap-3">
        <SuiteForm key={suites.length} support={support} analytes={known} count={suites.length} />
        <SuiteList suites={suites} />
      </div>
    </div>
  );
}
