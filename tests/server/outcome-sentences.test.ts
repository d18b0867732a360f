import { describe, expect, it } from 'vitest';
import en from '#locales/en/analysis.json' with { type: 'json' };
import fr from '#locales/fr/analysis.json' with { type: 'json' };
import type { AnalysisErrorCode, TrialNotice } from '#server/stats/engine.ts';
import { layoutFinding } from '#shared/trial.ts';

/** Every reason for which the engine refuses data: a code that is missing here does not compile. */
const refusals = {
  'no-values': true,
  'one-plot': true,
  'one-entry': true,
  'missing-column': true,
  'missing-level': true,
  'not-a-number': true,
  'not-finite': true,
  'negative-value': true,
  'value-out-of-range': true,
  'duplicate-plot': true,
  'duplicate-position': true,
  'unknown-check': true,
  'unknown-entry': true,
  'unknown-design': true,
  'too-large': true,
  'bad-option': true,
  'unreadable-file': true,
  'duplicate-cell': true,
  'bad-variance': true,
  disconnected: true,
} satisfies Record<AnalysisErrorCode, true>;

/** Everything that the engine notes about an analysis, with the values that its sentence is given. */
const notices = {
  'no-residual-df': [],
  'zero-residual-variance': [],
  'entry-without-data': ['entries'],
  disconnected: ['parts'],
  'term-confounded': ['terms'],
  'means-not-estimable': ['entries'],
  'component-not-identifiable': ['components'],
  'component-at-zero': ['components'],
  'not-converged': [],
  'groups-too-many': [],
} satisfies Record<TrialNotice['code'], readonly string[]>;

/** Said by the server about the analysis as a whole. */
const ownCodes = ['summary-without-error', 'comparison-not-available'];

const placeholdersOf = (sentence: string): string[] =>
  [...sentence.matchAll(/\{\{\s*(\w+)/g)].map(([, name]) => name ?? '');

describe.each(Object.entries({ en, fr }))('outcomes in %s', (_language, { outcomes, layout }) => {
  const sentences: Record<string, string | undefined> = outcomes;
  const layoutKeys = Object.keys(layout).map((key) => key.replace(/_.*$/, ''));

  it.each([...Object.keys(refusals), ...Object.keys(notices), ...ownCodes])('%s has its sentence', (code) => {
    expect(sentences[code]?.length).toBeGreaterThan(20);
  });

  it.each(Object.entries(notices))('%s names what it is about', (code, values) => {
    expect(placeholdersOf(sentences[code] ?? '').sort()).toEqual([...values].sort());
  });

  it('no sentence is without a code, but the one for whatever comes unforeseen', () => {
    const codes = new Set([...Object.keys(refusals), ...Object.keys(notices), ...ownCodes, 'other']);
    expect(Object.keys(outcomes).filter((key) => !codes.has(key.replace(/_.*$/, '')))).toEqual([]);
  });

  it('a refusal with plots at fault names them, and only those', () => {
    for (const [key, sentence] of Object.entries(outcomes))
      if (key.endsWith('_plots')) expect(placeholdersOf(sentence)).toEqual(['plots']);
    expect(Object.keys(outcomes)).toContain('missing-level_plots');
  });

  it.each(layoutFinding.shape.code.options)('the finding %s about the layout has its sentence', (code) => {
    expect(layoutKeys).toContain(code);
  });
});
