import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import { Link, NavLink } from 'react-router-dom';
import type { Language } from '#shared/account.ts';
import { GavelMark } from './gavel-mark.tsx';
import { LanguageSwitch } from './language-switch.tsx';
import { OfflineNotice } from './offline-notice.tsx';
import { Toaster } from './toaster.tsx';

export type NavItem = { to: string; label: string };

type AppShellProps = {
  homePath: string;
  navItems: readonly NavItem[];
  /** Name of who is signed in; nobody without it. */
  personName?: string;
  onLanguage: (language: Language) => void;
  onSignOut?: () => void;
  children: ReactNode;
};

/** Head, ways through the product and the page itself. On a phone the ways stand in a line of their own, all in view. */
export function AppShell({ homePath, navItems, personName, onLanguage, onSignOut, children }: AppShellProps) {
  const { t } = useTranslation('common');
  return (
    <>
      <a
        href="#page"
        className="sr-only focus:not-sr-only focus:absolute focus:left-2 focus:top-2 focus:z-10 focus:rounded-md focus:bg-card focus:p-3"
      >
        {t('skipToPage')}
      </a>
      <header className="border-b border-rule print:hidden">
        <div className="mx-auto flex max-w-page flex-wrap items-center gap-x-2 px-4 md:gap-x-6 md:px-8">
          <Link
            to={homePath}
            className="tap-target flex items-center gap-2 py-2 text-lg font-bold text-ink no-underline hover:underline"
          >
            <GavelMark />
            {t('productName')}
          </Link>
          {navItems.length > 0 && <MainNav items={navItems} />}
          <div className="ml-auto flex items-center gap-x-2 text-sm md:gap-x-4 md:text-base">
            <LanguageSwitch onChoose={onLanguage} />
            {personName !== undefined && (
              <span className="hidden text-sm text-faded lg:inline">{personName}</span>
            )}
            {onSignOut && (
              <button
                type="button"
                onClick={onSignOut}
                className="tap-target px-1 text-action underline underline-offset-4 hover:decoration-2"
              >
                {t('signOut')}
              </button>
            )}
          </div>
        </div>
      </header>
      <OfflineNotice />
      <main
        id="page"
        tabIndex={-1}
        className="mx-auto max-w-page px-4 pb-16 pt-5 outline-none md:px-8 md:pt-7"
      >
        {children}
      </main>
      <Toaster />
    </>
  );
}

function MainNav({ items }: { items: readonly NavItem[] }) {
  const { t } = useTranslation('common');
  return (
    <nav aria-label={t('mainNavigation')} className="order-last w-full md:order-none md:w-auto">
      <ul className="-mx-2 flex flex-wrap">
        {items.map((item) => (
          <li key={item.to}>
            <NavLink
              to={item.to}
              className={({ isActive }) =>
                `tap-target inline-flex items-center border-b-3 px-2 text-ink no-underline hover:underline ${isActive ? 'border-ink font-semibold' : 'border-transparent forced-colors:border-[color:Canvas]'}`
              }
            >
              {item.label}
            </NavLink>
          </li>
        ))}
      </ul>
    </nav>
  );
}
