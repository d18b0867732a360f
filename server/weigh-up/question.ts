import type { MoneyAssumptions } from '#shared/money.ts';

/** What is asked of the evidence. */
export type Question = {
  currentVarietyId: string;
  /** In the order in which they are answered. */
  candidateIds: readonly string[];
  /** all: every trait of the crop; yield: a list of candidates needs no more, and is asked for often */
  traits: 'all' | 'yield';
  /** null: no price sheet and nothing entered, so no money verdict */
  money: MoneyAssumptions | null;
  /** The price sheet in force: what the assumptions are held against. */
  priceSheet: MoneyAssumptions | null;
  askedAt: Date;
};
