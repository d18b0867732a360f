import type { ResourceLanguage } from 'i18next';
import type { GrowerCopySnapshot, LaterChange } from '#shared/grower-copy.ts';
import type { Scale } from '#shared/gap-scale.ts';
import type { Language } from '#shared/language.ts';
import type { ReaderUnits } from '#shared/reader-units.ts';
import type { Paper } from './page-flow.ts';

/** A copy and how it is wanted on paper. */
export type PrintOrder = {
  snapshot: GrowerCopySnapshot;
  laterChanges: readonly LaterChange[];
  /** ISO 8601, UTC. */
  expiresAt: string;
  /** The whole address of the copy, its secret last. */
  link: string;
  language: Language;
  /** Of the copy in that language, by namespace. */
  sentences: ResourceLanguage;
  readerUnits: ReaderUnits;
  paper: Paper;
  /** When the paper is made, ISO 8601. */
  printedAt: string;
};

/** An order with what all its pages share. */
export type PrintedCopy = PrintOrder & {
  /** On which every candidate's gap is drawn, t/ha. */
  scale: Scale;
};
