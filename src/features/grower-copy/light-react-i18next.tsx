import { createContext, useContext, useMemo, type ReactNode } from 'react';
import type { LightI18n, Translate } from './light-i18next.ts';

/** Stands for `react-i18next` in the script of the grower copy; see light-i18next.ts. */
const SentencesContext = createContext<LightI18n | null>(null);

export function I18nextProvider({ i18n, children }: { i18n: LightI18n; children: ReactNode }) {
  return <SentencesContext value={i18n}>{children}</SentencesContext>;
}

/** The sentences of one namespace or several; the first one's need no `name:` before the key. */
export function useTranslation(namespaces: string | readonly string[]): { t: Translate; i18n: LightI18n } {
  const i18n = useContext(SentencesContext);
  if (i18n === null) throw new Error('useTranslation stands outside of I18nextProvider');
  // A new array with the same names is the same namespaces.
  const names = [namespaces].flat().join();
  const t = useMemo(() => i18n.fixT(names.split(',')), [i18n, names]);
  return { t, i18n };
}
