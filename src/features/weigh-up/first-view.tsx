import type { Me } from '#shared/account.ts';
import { AppShell } from '#src/components/app-shell.tsx';
import { useNavItems } from '#src/nav-items.ts';
import { paths } from '#src/paths.ts';
import { VerdictAlone, type AnswerProps } from './verdict-alone.tsx';
import { WeighUpHeading } from './weigh-up-heading.tsx';

const notYet = (): void => undefined;

/**
 * The top of a weigh-up's page as the client renders it first: seen while the client's code is on its way, which then
 * puts its own in this place. Inert until then, so that no tap is lost on a button that does nothing yet.
 */
export function FirstView({ me, weighUp, result }: AnswerProps & { me: Me }) {
  const navItems = useNavItems(me.role);
  return (
    <div inert>
      <AppShell
        homePath={paths.home}
        navItems={navItems}
        personName={me.name}
        onLanguage={notYet}
        onSignOut={notYet}
      >
        <WeighUpHeading weighUp={weighUp} result={result} />
        <VerdictAlone weighUp={weighUp} result={result} />
      </AppShell>
    </div>
  );
}
