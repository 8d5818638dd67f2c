import { PageHead } from '#src/components/layout/page-head.tsx';
import { DemoPlate } from '#src/features/admin/components/demo-plate.tsx';
import { AllDepositsPlate } from '#src/features/admin/components/deposit-plate.tsx';
import { UserPlate } from '#src/features/admin/components/user-plate.tsx';
import { useMe } from '#src/lib/session.ts';
import { NothingHere } from '../route-error.tsx';

export function AdminPage() {
  const me = useMe();
  if (!me?.isAdministrator) return <NothingHere />;
  return (
    <>
      <PageHead
        title="Administration"
        finding="Accounts and deposits of this instance. People belong to deposits by their leads’ invitation."
      />
      <div className="grid gap-3">
        <UserPlate />
        <AllDepositsPlate />
        {me.isDemoInstance && <DemoPlate />}
      </div>
    </>
  );
}
