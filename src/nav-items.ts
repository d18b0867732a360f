import { useTranslation } from 'react-i18next';
import type { Role } from '#shared/account.ts';
import type { NavItem } from './components/app-shell.tsx';
import { paths } from './paths.ts';

type NavKey = 'weighUps' | 'trials' | 'trialDesk' | 'accounts';

/** What each role finds in the head of the page, its start first; the server guards the same ways by itself. */
const navByRole: Record<Role, readonly [NavKey, ...NavKey[]]> = {
  advisor: ['weighUps', 'trials'],
  agronomist: ['trialDesk', 'trials', 'weighUps'],
  administrator: ['accounts', 'trials'],
};

/** Where a role starts. */
export const startOf = (role: Role): string => paths[navByRole[role][0]];

/** The ways in the head of the page; none for nobody. */
export function useNavItems(role: Role | undefined): NavItem[] {
  const { t } = useTranslation('common');
  return (role ? navByRole[role] : []).map((key) => ({ to: paths[key], label: t(`nav.${key}`) }));
}
