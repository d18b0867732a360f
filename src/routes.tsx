import { Route, Routes } from 'react-router-dom';
import { AppLayout, HomeRedirect, SignedInOnly } from './app-layout.tsx';
import { lazyPage } from './lazy-page.tsx';
import { NotFoundPage } from './not-found-page.tsx';
import { paths } from './paths.ts';

const SignInPage = lazyPage(
  async () => (await import('./features/sign-in/sign-in-page.tsx')).SignInPage,
  ['sign-in'],
);

/** Every page of the client. Each feature is fetched when one of its pages is first opened. */
export function AppRoutes() {
  return (
    <Routes>
      <Route element={<AppLayout />}>
        <Route path={paths.signIn} element={<SignInPage />} />
        <Route element={<SignedInOnly />}>
          <Route path={paths.home} element={<HomeRedirect />} />
        </Route>
        <Route path="*" element={<NotFoundPage />} />
      </Route>
    </Routes>
  );
}
