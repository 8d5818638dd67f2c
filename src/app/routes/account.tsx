import { PageHead } from '#src/components/layout/page-head.tsx';
import { RadioGroup } from '#src/components/ui/choices.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { NameFields, PasswordFields } from '#src/features/auth/components/account-forms.tsx';
import { SessionTable } from '#src/features/auth/components/session-table.tsx';
import { Theme, THEME_WORDS, useTheme } from '#src/lib/theme.ts';
import { useMe } from '#src/lib/session.ts';

export function AccountPage() {
  const me = useMe();
  const [theme, setTheme] = useTheme();
  if (!me) return null;
  return (
    <>
      <PageHead title="Your account" finding={`Signed in as ${me.email}.`} />
      <div className="grid items-start gap-3 lg:grid-cols-2">
        <Plate title="You">
          <NameFields name={me.name} email={me.email} />
        </Plate>
        <Plate title="Password">
          <PasswordFields />
        </Plate>
        <Plate
          title="Sessions"
          qualifier="ended after 12 hours without use"
          className="lg:col-span-2"
        >
          <SessionTable />
        </Plate>
        <Plate title="Look" qualifier="kept in this browser">
          <RadioGroup
            label="Theme"
            isInline
            choices={Theme.options.map((value) => ({ value, label: THEME_WORDS[value] }))}
            value={theme}
            onPick={setTheme}
          />
        </Plate>
      </div>
    </>
  );
}
