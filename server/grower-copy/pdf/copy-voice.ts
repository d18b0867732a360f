import type { Caution } from '#shared/caution.ts';
import { tellCautions, type CautionSentence } from '#shared/caution-sentences.ts';
import type { Language } from '#shared/language.ts';
import { toReader } from '#shared/reader-units.ts';
import type { Say } from '#shared/say-sentences.ts';
import { zoneOfCopy } from '#shared/zone-of-copy.ts';
import { writeFigures, type FigureWriter } from '#shared/write-figures.ts';
import type { CopySentenceKey } from '#server/grower-copy/copy-sentences.ts';
import { openSentences } from '#server/open-sentences.ts';
import type { PrintOrder } from './printed-copy.ts';

/** How a printed copy speaks: one language, one set of units. */
export type CopyVoice = {
  language: Language;
  say: Say<CopySentenceKey>;
  write: FigureWriter;
  tellCautions: (cautions: readonly Caution[]) => CautionSentence[];
  /** Stored unit of yield gaps; `write` brings it to the reader's. */
  unit: 't/ha';
  /** Of yield gaps, as their errors support. */
  decimals: number;
  /** The reader's unit in one of the stored one, for the figures of an axis. */
  unitFactor: number;
};

/** The voice in which a copy is printed. */
export function openCopyVoice({ language, sentences: given, readerUnits, snapshot }: PrintOrder): CopyVoice {
  const { candidates } = snapshot.result;
  const sentences = openSentences(language, given, 'print');
  const say: Say<CopySentenceKey> = (key, values) => sentences.t(key, values ?? {});
  const write = writeFigures(language, readerUnits, zoneOfCopy(snapshot));
  const unit = 't/ha';
  return {
    language,
    say,
    write,
    tellCautions: (cautions) =>
      tellCautions(cautions, {
        say: (code, values) => sentences.t(`cautions:${code}`, values),
        has: (key) => sentences.exists(`cautions:${key}`),
        language,
        readerUnits,
      }),
    unit,
    decimals: write.decimals(candidates.find(({ gap }) => gap)?.gap?.se ?? null, unit),
    unitFactor: toReader(1, unit, readerUnits),
  };
}
