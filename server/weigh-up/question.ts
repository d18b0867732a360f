import type { MoneyAssumptions } from '#shared/money.ts';
import type { QuestionKind } from '#shared/question-kind.ts';

/** What is asked of the evidence. The whole of it is part of an answer's key, so it holds nothing that an answer does not hang on. */
export type Question = {
  currentVarietyId: string;
  /** In the order in which they are answered. */
  candidateIds: readonly string[];
  kind: QuestionKind;
  /** For the best of a list, all of the list but the current variety, the candidates among them; else empty. */
  list: readonly string[];
  /** all: every trait of the crop; a list of candidates needs yield and what buyers pay by, no more, and is asked for often */
  traits: 'all' | 'yield' | readonly string[];
  /** Whether trials of other regions may answer alone, which the advisor has to ask for. */
  acceptsOtherRegions: boolean;
  /** What is old is old from here. */
  askedInSeason: number;
  /** By candidate, yield gaps that do not matter although they are wider than the trait's own margin, t/ha. */
  margins: Readonly<Record<string, number>>;
};

/** What an answer is priced with. */
export type MoneyGround = {
  /** null: no price sheet and nothing entered, so no money verdict */
  money: MoneyAssumptions | null;
  /** The price sheet in force: what the assumptions are held against. */
  priceSheet: MoneyAssumptions | null;
  /** t/ha that the grower usually gets; null where nobody has said */
  usualYield: number | null;
  /** Of yield for the crop, t/ha: gaps within it do not matter whatever seed costs. */
  practicalMargin: number;
  askedAt: Date;
};
