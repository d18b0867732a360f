import { Route, Routes } from 'react-router-dom';
import { AppLayout, HomeRedirect, SignedInOnly } from './app-layout.tsx';
import { lazyPage } from './lazy-page.tsx';
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
