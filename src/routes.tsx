import { matchRoutes, Route, Routes } from 'react-router-dom';
import { readMe } from '#shared/account.ts';
import { AppLayout, HomeRedirect, SignedInOnly } from './app-layout.tsx';
import { peekFirstAnswer } from './first-answers.ts';
import { lazyPage, type LazyPage } from './lazy-page.tsx';
import { NotFoundPage } from './not-found-page.tsx';
import { paths } from './paths.ts';

const SignInPage = lazyPage(
  async () => (await import('./features/sign-in/sign-in-page.tsx')).SignInPage,
  ['sign-in'],
);

const WeighUpsPage = lazyPage(
  async () => (await import('./features/weigh-up/weigh-ups-page.tsx')).WeighUpsPage,
  ['weigh-up'],
);
const NewWeighUpPage = lazyPage(
  async () => (await import('./features/weigh-up/new-weigh-up-page.tsx')).NewWeighUpPage,
  ['weigh-up', 'verdicts', 'cautions', 'drawings'],
);
const WeighUpPage = lazyPage(
  async () => (await import('./features/weigh-up/weigh-up-page.tsx')).WeighUpPage,
  ['weigh-up', 'verdicts', 'cautions', 'method', 'drawings'],
);
const TrialsPage = lazyPage(
  async () => (await import('./features/trials/trials-page.tsx')).TrialsPage,
  ['trials'],
);
const TrialPage = lazyPage(
  async () => (await import('./features/trials/trial-page.tsx')).TrialPage,
  ['trials', 'analysis', 'cautions', 'drawings'],
);
const DeskPage = lazyPage(
  async () => (await import('./features/trial-desk/desk-page.tsx')).DeskPage,
  ['desk', 'trials'],
);
const ImportPage = lazyPage(
  async () => (await import('./features/trial-desk/import-page.tsx')).ImportPage,
  ['desk', 'trials', 'problems', 'analysis', 'cautions', 'drawings'],
);
const DeskTrialPage = lazyPage(
  async () => (await import('./features/trial-desk/desk-trial-page.tsx')).DeskTrialPage,
  ['desk', 'trials', 'analysis', 'cautions', 'drawings'],
);
const UsualVariancesPage = lazyPage(
  async () => (await import('./features/trial-desk/usual-variances-page.tsx')).UsualVariancesPage,
  ['desk'],
);
const AccountsPage = lazyPage(
  async () => (await import('./features/accounts/accounts-page.tsx')).AccountsPage,
  ['accounts'],
);
const NewAccountPage = lazyPage(
  async () => (await import('./features/accounts/new-account-page.tsx')).NewAccountPage,
  ['accounts'],
);
const AuditLogPage = lazyPage(
  async () => (await import('./features/accounts/audit-log-page.tsx')).AuditLogPage,
  ['accounts'],
);

type PageName = Exclude<keyof typeof paths, 'home'>;

const pages: Record<PageName, LazyPage> = {
  signIn: SignInPage,
  weighUps: WeighUpsPage,
  newWeighUp: NewWeighUpPage,
  weighUp: WeighUpPage,
  trials: TrialsPage,
  trial: TrialPage,
  trialDesk: DeskPage,
  deskImport: ImportPage,
  usualVariances: UsualVariancesPage,
  deskTrial: DeskTrialPage,
  accounts: AccountsPage,
  newAccount: NewAccountPage,
  auditLog: AuditLogPage,
};
// An object's keys are not typed as such, since it may have more of them; this one has not.
const pageNames = Object.keys(pages) as PageName[];

/**
 * Fetches the page of an address before it is rendered, so that what is rendered first is the page itself.
 * @param started sentences can be loaded from then on
 */
export async function preparePage(pathname: string, started: Promise<void>): Promise<void> {
  const routes = pageNames.map((name) => ({ path: paths[name], page: pages[name] }));
  // Whoever is known not to be signed in is led to the sign-in page.
  const isKnownStranger = peekFirstAnswer(readMe, {})?.me === null;
  const [match] = matchRoutes(routes, isKnownStranger ? paths.signIn : pathname) ?? [];
  await match?.route.page.prepare(started);
}

/** Every page of the client. Each feature is fetched when one of its pages is first opened. */
export function AppRoutes() {
  return (
    <Routes>
      <Route element={<AppLayout />}>
        <Route path={paths.signIn} element={<SignInPage />} />
        <Route element={<SignedInOnly />}>
          <Route path={paths.home} element={<HomeRedirect />} />
          <Route path={paths.trials} element={<TrialsPage />} />
          <Route path={paths.trial} element={<TrialPage />} />
        </Route>
        <Route element={<SignedInOnly roles={['advisor', 'agronomist']} />}>
          <Route path={paths.weighUps} element={<WeighUpsPage />} />
          <Route path={paths.newWeighUp} element={<NewWeighUpPage />} />
          <Route path={paths.weighUp} element={<WeighUpPage />} />
          <Route path={paths.usualVariances} element={<UsualVariancesPage />} />
        </Route>
        <Route element={<SignedInOnly roles={['agronomist']} />}>
          <Route path={paths.trialDesk} element={<DeskPage />} />
          <Route path={paths.deskImport} element={<ImportPage />} />
          <Route path={paths.deskTrial} element={<DeskTrialPage />} />
        </Route>
        <Route element={<SignedInOnly roles={['administrator']} />}>
          <Route path={paths.accounts} element={<AccountsPage />} />
          <Route path={paths.newAccount} element={<NewAccountPage />} />
          <Route path={paths.auditLog} element={<AuditLogPage />} />
        </Route>
        <Route path="*" element={<NotFoundPage />} />
      </Route>
    </Routes>
  );
}
