import type { Language } from '#shared/language.ts';
import type { CandidateResult, WeighUp } from '#shared/weigh-up.ts';

/** What the script of a grower copy's page is given, as far as tests ask for it. */
export type CopyPageData = {
  language: Language;
  answer: { weighUp: Partial<WeighUp>; candidates: CandidateResult[]; practicalMargin: number | null };
};

const entities: Record<string, string> = { amp: '&', lt: '<', gt: '>', quot: '"', '#x27': "'" };

/** The words of a page as a person reads them on a screen: no tags, no scripts, no address for paper, entities written out. */
export function readWords(html: string): string {
  return html
    .replace(/<script\b.*?<\/script>/gs, '')
    .replace(/<p class="hidden print:block">.*?<\/p>/gs, '')
    .replace(/<\/(p|li|h\d|td|th|div|summary|title|label|caption)>/g, '\n')
    .replace(/<[^>]*>/g, '')
    .replace(/&(#?\w+);/g, (whole, name: string) => entities[name] ?? whole);
}
