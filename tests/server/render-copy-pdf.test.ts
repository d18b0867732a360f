import { describe, expect, expectTypeOf, test } from 'vitest';
import type { CopySentenceKey } from '#server/grower-copy/copy-sentences.ts';
import { renderCopyPdf } from '#server/grower-copy/pdf/render-copy-pdf.ts';
import { buildCandidate, buildOrder, manyCautions } from '#tests/support/copy-order.ts';
import { findMisplaced, listElements, readPdf } from '#tests/support/read-pdf.ts';

const languages = ['en', 'fr'] as const;
const sheets = { a4: [595.28, 841.89], letter: [612, 792] } as const;
/** Nothing of the text lies nearer to the paper's sides, points. */
const margin = 40;

describe.each(languages)('in %s', (language) => {
  test.each(['a4', 'letter'] as const)('%s has its size, and says who, what and whose', async (paper) => {
    const pdf = await readPdf(renderCopyPdf(buildOrder({ language, paper })));
    const [width, height] = sheets[paper];
    for (const page of pdf.pages) {
      expect(page.width).toBeCloseTo(width, 1);
      expect(page.height).toBeCloseTo(height, 1);
    }
    expect(pdf.language).toBe(language);
    expect(pdf.author).toBe('Wren Halloway');
    expect(pdf.title).toBe(
      language === 'en'
        ? 'Spring barley, Upper Velmar: is it time to leave Tamberlow?'
        : 'Orge de printemps, Haut-Velmar\u202f: faut‑il quitter Tamberlow\u202f?',
    );
    expect(pdf.bookmarks).toEqual([pdf.title, 'Quillane', 'Ostermay', expect.any(String)]);
    expect(pdf.links).toEqual(['mailto:advisor@example.org', 'tel:5550142', buildOrder().link]);
  });

  test('the figures are those of the copy, written as the language does', async () => {
    const { words } = await readPdf(renderCopyPdf(buildOrder({ language })));
    const said =
      language === 'en'
        ? ['+0.50 t/ha', '+$72/ha', 'pays in 86 of 100', '+0.22 and +0.78 t/ha (95% interval)', 'Dunnett']
        : ['+0,50 t/ha', '+72 $/ha', 'rentable 86 fois sur 100', '+0,22 et +0,78 t/ha (intervalle à 95 %)'];
    for (const figure of said) expect(words).toContain(figure);
    expect(words).toContain('advisor@example.org');
    expect(words).toContain(language === 'en' ? 'or call 555-0142' : 'ou appelez le 555-0142');
    expect(words).toContain(buildOrder().link);
    // A key without its sentence would stand there as it is.
    expect(words).not.toMatch(
      /\b(verdicts|common|method|print|copy|drawings|cautions):[a-z]|\b(traits|story|column|siteLines|gapStrip)\.[a-z]|\{\{|undefined|NaN/,
    );
  });

  test('eight candidates with long names and thirty cautions flow over pages without lying on each other', async () => {
    const name = 'Sommerfeldt-Hollingsworth Extraordinaire AC 2041';
    const candidates = Array.from({ length: 8 }, (_, n) =>
      buildCandidate(n, `${name} ${n}`, { cautions: manyCautions(2) }),
    );
    const order = buildOrder({
      language,
      paper: 'letter',
      candidates,
      cautions: manyCautions(30),
      trials: 40,
    });
    const pdf = await readPdf(renderCopyPdf(order));
    for (const page of pdf.pages) expect(findMisplaced(page, margin)).toEqual([]);
    for (let n = 1; n <= 30; n += 1) expect(pdf.words).toContain(`Faraway ${n},`);
    expect(pdf.bookmarks).toHaveLength(10);
    const last = pdf.pages.length;
    expect(pdf.words).toContain(language === 'en' ? `Page ${last} of ${last}` : `Page ${last} sur ${last}`);
  });
});

test('it is tagged: headings in order, tables with headings, figures told in words', async () => {
  const pdf = await readPdf(renderCopyPdf(buildOrder()));
  expect(pdf.isTagged).toBe(true);
  const elements = listElements(pdf.structure);
  const roles = elements.map(({ role }) => role);
  expect(roles.filter((role) => role === 'H1')).toHaveLength(1);
  const levels = roles.filter((role) => /^H\d$/.test(role)).map((role) => Number(role[1]));
  levels.forEach((level, i) => expect(level - (levels[i - 1] ?? 0)).toBeLessThanOrEqual(1));
  const figures = elements.filter(({ role }) => role === 'Figure');
  // The code, each candidate in the list, each on its own page.
  expect(figures).toHaveLength(5);
  for (const { alt } of figures) expect(alt?.length).toBeGreaterThan(20);
  expect(figures[1]?.alt?.replaceAll('\u00a0', ' ')).toContain(
    'Quillane against Tamberlow: estimated gap +0.50 t/ha.',
  );
  const tables = elements.filter(({ role }) => role === 'Table');
  expect(tables.length).toBeGreaterThanOrEqual(5);
  for (const table of tables) {
    const inside = listElements(table.children).map(({ role }) => role);
    expect(inside.filter((role) => role === 'TH').length).toBeGreaterThan(1);
    expect(inside).toContain('TR');
  }
});

test('every font is embedded', async () => {
  const { fonts } = await readPdf(renderCopyPdf(buildOrder()));
  expect(fonts.named).toBe(2);
  expect(fonts.embedded).toBe(fonts.named);
});

test('names from anywhere are written whole, and what the typeface lacks is seen to lack', async () => {
  const candidates = [buildCandidate(0, 'Łódź Ζέα Жито Tiễn'), buildCandidate(1, '小麦')];
  const { words, fonts } = await readPdf(renderCopyPdf(buildOrder({ candidates })));
  expect(words).toContain('Łódź Ζέα Жито Tiễn');
  expect(words).toContain('\ufffd\ufffd against Tamberlow');
  expect(fonts.embedded).toBe(fonts.named);
});

test('a candidate with too few trials gets no interval and no return', async () => {
  const thin = buildCandidate(0, 'Quillane', { verdict: 'thin', siteYears: 1 });
  const { words } = await readPdf(renderCopyPdf(buildOrder({ candidates: [thin] })));
  expect(words).toContain('That is too few for an interval or a verdict.');
  expect(words).toContain('can’t say');
  expect(words).not.toContain('+0.22 and +0.78');
  expect(words).not.toContain('+$72/ha');
});

test('a region without trials gets no verdict, and no page for a candidate', async () => {
  const order = buildOrder({ answer: 'no-trials', candidates: [], trials: 0 });
  const { words, pages } = await readPdf(renderCopyPdf(order));
  expect(words).toContain('There is no verdict for this region');
  expect(pages).toHaveLength(2);
});

test('trials left out are told with their reason, and what became of a trial since', async () => {
  const [trial] = buildOrder().snapshot.result.trials;
  if (trial === undefined) throw new Error('the order has trials');
  const order = buildOrder({
    leftOut: [{ ...trial, siteName: 'Gorse End', reason: 'ticked-off', reasonText: 'hail in June' }],
    laterChanges: [{ trialId: trial.trialId, siteName: 'Site 1', season: 2022, change: 'withdrawn' }],
  });
  const { words } = await readPdf(renderCopyPdf(order));
  expect(words).toContain('Gorse End');
  expect(words).toContain('“hail in June”');
  expect(words).toContain('The trial at Site 1, 2022, was withdrawn after this copy was made.');
});

test('yields are written in the unit that the grower reads', async () => {
  const order = buildOrder({ readerUnits: { yieldUnit: 'bu/ac', bushelWeightLb: 48 } });
  const { words } = await readPdf(renderCopyPdf(order));
  // 0.50 t/ha of 48 lb bushels: 0.5 × 0.40468564224 / (48 × 0.00045359237).
  expect(words).toContain('+9.3 bu/ac');
  expect(words).not.toContain('t/ha against');
});

test('the best of a list is told with each variety’s standing, in a table of its own', async () => {
  const standing = (n: number, varietyName: string, low: number, high: number) => ({
    varietyId: `00000000-0000-4000-8000-${String(n).padStart(12, '0')}`,
    varietyName,
    estimate: (low + high) / 2,
    interval: { low, high, level: 0.95 },
    mayBeBest: high > 0,
    isBest: low >= 0,
  });
  const standings = [standing(1, 'Quillane', 0, 0.62), standing(2, 'Tamberlow', -0.84, 0)];
  const order = buildOrder({ best: { standings, thin: ['Larkhollow'] } });
  const { words, structure } = await readPdf(renderCopyPdf(order));
  expect(words).toContain('Each variety of the list against the best of the others');
  expect(words).toContain('95% interval, all at once');
  expect(words).toMatch(/Quillane \+0\.31 t.ha 0\.00 to \+0\.62 t.ha It alone can/);
  expect(words).toMatch(/Tamberlow −0\.42 t.ha −0\.84 to 0\.00 t.ha Shown not to be/);
  const tablesOf = (elements: typeof structure) =>
    listElements(elements).filter(({ role }) => role === 'Table').length;
  const without = await readPdf(renderCopyPdf(buildOrder()));
  expect(tablesOf(structure)).toBe(tablesOf(without.structure) + 1);
});

test('a key without a sentence does not compile', () => {
  expectTypeOf<'verdicts:best.show' | 'print:foot' | 'verdicts:cautionCount'>().toExtend<CopySentenceKey>();
  expectTypeOf<'verdicts:best.gone'>().not.toExtend<CopySentenceKey>();
});

test('its days are those of the place where it was made, and UTC is said where that is not known', async () => {
  const order = buildOrder();
  const late = { ...order.snapshot, madeAt: '2026-12-01T03:30:00.000Z' };
  const told = await readPdf(
    renderCopyPdf({ ...order, snapshot: { ...late, timeZone: 'America/Montreal' } }),
  );
  expect(told.words).toContain('Figures frozen on 30 November 2026,');
  expect(told.words).toContain('prepared by Wren Halloway on 30 November 2026');
  const untold = await readPdf(renderCopyPdf({ ...order, snapshot: late }));
  expect(untold.words).toContain('Figures frozen on 1 December 2026 (UTC),');
});
