import { PageHead } from '#src/components/layout/page-head.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { SettingsForm } from '#src/features/deposits/components/settings-form.tsx';
import { useDeposit } from '#src/lib/use-deposit.ts';

export function SettingsPage() {
  const { name } = useDeposit();
  return (
    <div className="max-w-[44rem]">
      <PageHead
        title="Settings"
        finding={`Name, grid and analytes of ${name}. Grades are stored in ppm; the units here are for reading.`}
      />
      <Plate title="The deposit">
        <SettingsForm />
      </Plate>
    </div>
  );
}
