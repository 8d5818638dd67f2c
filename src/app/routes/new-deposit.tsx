import { useNavigate } from 'react-router-dom';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { useCreateDeposit } from '#src/features/deposits/api/deposit-mutations.ts';
import { DepositFields } from '#src/features/deposits/components/deposit-form.tsx';
import { NEW_DEPOSIT } from '#src/features/deposits/model.ts';

export function NewDepositPage() {
  const navigate = useNavigate();
  const create = useCreateDeposit(({ id }) => void navigate(`/deposits/${id}`));
  return (
    <div className="max-w-[40rem]">
      <PageHead
        title="New deposit"
        finding="A deposit is the workspace of one project. You become its lead and can invite others."
      />
      <Plate title="The deposit" qualifier="all of it can be changed later">
        <DepositFields
          initial={NEW_DEPOSIT}
          submitLabel="Create the deposit"
          isBusy={create.isPending}
          error={create.error}
          onSubmit={(body) => create.mutate(body)}
        />
      </Plate>
    </div>
  );
}
