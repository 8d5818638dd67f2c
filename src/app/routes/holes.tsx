import { useQuery } from '@tanstack/react-query';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { LinkButton } from '#src/components/ui/button.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { HolesPlan } from '#src/features/holes/components/holes-plan.tsx';
import { HolesTable } from '#src/features/holes/components/holes-table.tsx';
import { holesFinding } from '#src/features/holes/finding.ts';
import { gridName } from '#src/features/holes/units.ts';
import { holesQuery, snapshotQuery } from '#src/lib/deposit-queries.ts';
import { stagePath } from '#src/lib/stages.ts';
import { urlText, useUrlState } from '#src/lib/url-state.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';

const AUTOMATIC = 'pay';
const VIEW = { find: urlText(), hole: urlText(), by: urlText(AUTOMATIC) };

export function HolesPage() {
  const deposit = useDeposit();
  const { id: depositId, payAnalytes } = deposit;
  const { data, error, refetch } = useQuery(holesQuery(depositId));
  const snapshot = useQuery(snapshotQuery(depositId)).data?.snapshot ?? null;
  const [{ find, hole, by }, setView] = useUrlState(VIEW);
  const holes = data?.holes ?? [];
  const assayed = snapshot?.analytes.map(({ analyte }) => analyte) ?? [];
  const analyte = by === AUTOMATIC ? (payAnalytes.find((pay) => assayed.includes(pay.analyte))?.analyte ?? '') : by;
  const intake = stagePath(depositId, 'intake');
  return (
    <div className="lg:flex lg:h-full lg:min-h-[34rem] lg:flex-col">
      <PageHead title="Holes" finding={data && holesFinding(data.holes, data.faults)} actions={<LinkButton to={intake}>Tables of Intake</LinkButton>} />
      {!data && (error ? <Problem error={error} action={{ label: 'Try again', run: () => void refetch() }} /> : <Loading label="Reading the holes" />)}
      {data && holes.length === 0 && (
        <Plate title="Holes">
          <Empty action={<LinkButton to={intake} kind="main">Bring in files</LinkButton>}>Holes are listed and drawn here once collars are loaded; surveys bend their traces.</Empty>
        </Plate>
      )}
      {data && holes.length > 0 && (
        <div className="grid gap-3 lg:min-h-0 lg:flex-1 lg:grid-cols-[minmax(0,1.1fr)_minmax(0,1fr)] lg:grid-rows-[minmax(0,1fr)]">
          <HolesTable depositId={depositId} holes={data.holes} find={find} onFind={(text) => setView({ find: text })} chosen={hole} onChoose={(name) => setView({ hole: name })} fileName={`${deposit.name}-holes`} />
          <HolesPlan
            {...{ depositId, snapshot, payAnalytes, analyte }}
            depositName={deposit.name}
            gridName={gridName(deposit.grid)}
            holes={data.holes}
            faults={data.faults}
            chosen={hole}
            onChoose={(name) => setView({ hole: name })}
            onAnalyte={(name) => setView({ by: name })}
          />
        </div>
      )}
    </div>
  );
}
