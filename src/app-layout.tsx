import { Suspense, useLayoutEffect } from 'react';
import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Navigate, Outlet, useLocation, useNavigationType } from 'react-router-dom';
import type { Role } from '#shared/account.ts';
import { BrokenPage } from './broken-page.tsx';
import { AppShell } from './components/app-shell.tsx';
import { ErrorBoundary } from './components/error-boundary.tsx';
import { PageHeading } from './components/page-heading.tsx';
import { Skeleton } from './components/skeleton.tsx';
import { SessionExpiredDialog } from './features/sign-in/session-expired-dialog.tsx';
import { startOf, useNavItems } from './nav-items.ts';
import { paths, signInPath } from './paths.ts';
import { QueryErrorState } from './query-error-state.tsx';
import { meQuery, useLanguageSwitch, useSignOut } from './session.ts';

/** The frame around every page, with what the signed-in person may do, or without anybody. */
export function AppLayout() {
  const { pathname } = useLocation();
  const { data: me } = useQuery(meQuery);
  const chooseLanguage = useLanguageSwitch();
  const signOut = useSignOut();
  useScrollToTop();
  const navItems = useNavItems(me?.role);
  return (
    <AppShell
      homePath={paths.home}
      navItems={navItems}
      onLanguage={chooseLanguage}
      {...(me && { personName: me.name, onSignOut: signOut })}
    >
      <ErrorBoundary resetKey={pathname} fallback={(error) => <BrokenPage error={error} />}>
        <Suspense fallback={<Skeleton />}>
          <Outlet />
        </Suspense>
      </ErrorBoundary>
      <SessionExpiredDialog />
    </AppShell>
  );
}

/** A new page starts at its top; going back keeps the place that the browser remembers. */
function useScrollToTop(): void {
  const { pathname } = useLocation();
  const navigation = useNavigationType();
  useLayoutEffect(() => {
    if (navigation !== 'POP') window.scrollTo(0, 0);
    // Only another page scrolls: a change of the address's parameters does not.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [pathname]);
}

/** Lets only signed-in people, of the given roles where there are any, to the pages inside. */
export function SignedInOnly({ roles }: { roles?: readonly Role[] }) {
  const { pathname, search } = useLocation();
  const me = useQuery(meQuery);
  if (me.isPending) return <Skeleton />;
  if (me.isError) return <QueryErrorState query={me} />;
  if (me.data === null) return <Navigate to={signInPath(pathname + search)} replace />;
  if (roles && !roles.includes(me.data.role)) return <NotForRole />;
  return <Outlet />;
}

function NotForRole() {
  const { t } = useTranslation('common');
  return (
    <>
      <PageHeading title={t('notAllowedTitle')} />
      <p className="max-w-prose">{t('notForYourRole')}</p>
    </>
  );
}

/** Sends a signed-in person to where their role starts. */
export function HomeRedirect() {
  const { data: me } = useQuery(meQuery);
  return me ? <Navigate to={startOf(me.role)} replace /> : null;
}
