import { useTranslation } from 'react-i18next';
import type { Language } from '#shared/account.ts';
import type { Caution } from '#shared/caution.ts';
import type { CautionItem } from './components/caution-list.tsx';
import { useReaderUnits } from './components/reader-units-context.tsx';
import { useLanguage } from './components/use-language.ts';

/** Turns cautions into their sentences. The same caution twice, of two candidates say, is said once. */
export function useCautionItems(): (cautions: readonly Caution[]) => CautionItem[] {
  const { t, i18n } = useTranslation('cautions');
  const language = useLanguage();
  const readerUnits = useReaderUnits();
  return (cautions) => {
    const items = new Map<string, CautionItem>();
    for (const { code, severity, values } of cautions) {
      const context = chooseContext(code, values, (key) => i18n.exists(`cautions:${key}`));
      const text = t(code, { ...nameLists(values, language), readerUnits, ...(context && { context }) });
      if (!items.has(text)) items.set(text, { id: text, severity, text });
    }
    return [...items.values()];
  };
}

/** Names that come in both languages, such as regions, become one list in words. */
function nameLists(values: Caution['values'], language: Language): Record<string, string | number> {
  const list = new Intl.ListFormat(language, { type: 'conjunction' });
  return Object.fromEntries(
    Object.entries(values).map(([name, value]) => [
      name,
      typeof value === 'object' ? list.format(value.map((names) => names[language])) : value,
    ]),
  );
}

/** Some sentences have a wording of their own for one trial among many: `trial-weak-cv_named`. */
function chooseContext(
  code: string,
  values: Caution['values'],
  exists: (key: string) => boolean,
): string | undefined {
  if (values.context !== undefined) return String(values.context);
  return values.site !== undefined && exists(`${code}_named`) ? 'named' : undefined;
}
