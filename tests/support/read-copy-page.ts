import type { Language } from '#shared/language.ts';
import type { CandidateResult, WeighUp } from '#shared/weigh-up.ts';

/** What the page of a grower copy carries for its script, as far as tests ask for it. */
export type CopyPageData = {
  language: Language;
  answer: { weighUp: Partial<WeighUp>; candidates: CandidateResult[]; practicalMargin: number | null };
};

const entities: Record<string, string> = { amp: '&', lt: '<', gt: '>', quot: '"', '#x27': "'" };

/** The words of a page as a person reads them: no tags, no scripts, entities written out. */
export function readWords(html: string): string {
  return html
    .replace(/<script\b.*?<\/script>/gs, '')
    .replace(/<\/(p|li|h\d|td|th|div|summary|title|label|caption)>/g, '\n')
    .replace(/<[^>]*>/g, '')
    .replace(/&(#?\w+);/g, (whole, name: string) => entities[name] ?? whole);
}

/** @throws Error when the page carries no data, as the pages of dead links do not */
export function readCopyData(html: string): CopyPageData {
  const json = /<script id="copy-data" type="application\/json">(.*?)<\/script>/s.exec(html)?.[1];
  if (json === undefined) throw new Error('the page carries no data');
  return JSON.parse(json) as CopyPageData;
}
