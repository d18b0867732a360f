import { useTranslation } from 'react-i18next';
import type { Caution } from '#shared/caution.ts';
import { tellCautions } from '#shared/caution-sentences.ts';
import type { CautionItem } from './components/caution-list.tsx';
import { useReaderUnits } from './components/reader-units-context.tsx';
import { useLanguage } from './components/use-language.ts';

/** Turns cautions into their sentences. The same caution twice, of two candidates say, is said once. */
export function useCautionItems(): (cautions: readonly Caution[]) => CautionItem[] {
  const { t, i18n } = useTranslation('cautions');
  const language = useLanguage();
  const readerUnits = useReaderUnits();
  return (cautions) =>
    tellCautions(cautions, {
      say: (code, values) => t(code, values),
      has: (key) => i18n.exists(`cautions:${key}`),
      language,
      readerUnits,
    }).map((sentence) => ({ id: sentence.text, ...sentence }));
}
