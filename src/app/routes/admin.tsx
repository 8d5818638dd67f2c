import { PageHead } from '#src/components/layout/page-head.tsx';
import { DemoPlate } from '#src/features/admin/components/demo-plate.tsx';
import { AllDepositsPlate } from '#src/features/admin/components/deposit-plate.tsx';
import { UserPlate } from '#src/features/admin/components/user-plate.tsx';
import { Absent } from '#src/lib/absent.ts';
import { useMe } from '#src/lib/session.ts';

export function AdminPage() {
  const me = useMe();
  if (!me?.isAdministrator) throw new Absent();
  return (
    <>
      <PageHead title="Administration" finding="Accounts and deposits of this instance. People belong to deposits by their leads' invitation." />
      <div className="grid gap-3">
        <UserPlate />
        <AllDepositsPlate />
        {me.isDemoInstance && <DemoPlate />}
      </div>
    </>
  );
}
