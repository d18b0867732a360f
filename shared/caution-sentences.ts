import type { Caution, CautionCode, CautionSeverity } from './caution.ts';
import type { Language } from './language.ts';
import type { ReaderUnits } from './reader-units.ts';

/** A caution in words. */
export type CautionSentence = { severity: CautionSeverity; text: string };

/** How a caution's sentence is found: said with its values, and whether a wording exists under a key. */
export type CautionSayer = {
  say: (key: CautionCode, values: Record<string, unknown>) => string;
  has: (key: string) => boolean;
  language: Language;
  readerUnits: ReaderUnits;
};

const gravity: Record<CautionSeverity, number> = { stop: 0, warning: 1, note: 2 };

/** Gravest first; those of one gravity stay in their order. */
export function sortByGravity<Item extends { severity: CautionSeverity }>(items: readonly Item[]): Item[] {
  return [...items].sort((a, b) => gravity[a.severity] - gravity[b.severity]);
}

/** Turns cautions into their sentences. The same caution twice, of two candidates say, is said once. */
export function tellCautions(
  cautions: readonly Caution[],
  { say, has, language, readerUnits }: CautionSayer,
): CautionSentence[] {
  const sentences = new Map<string, CautionSentence>();
  for (const { code, severity, values } of cautions) {
    const context = chooseContext(code, values, has);
    const text = say(code, { ...nameLists(values, language), readerUnits, ...(context && { context }) });
    if (!sentences.has(text)) sentences.set(text, { severity, text });
  }
  return [...sentences.values()];
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
  has: (key: string) => boolean,
): string | undefined {
  if (values.context !== undefined) return String(values.context);
  return values.site !== undefined && has(`${code}_named`) ? 'named' : undefined;
}
