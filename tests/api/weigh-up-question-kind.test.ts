import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { eq } from 'drizzle-orm';
import { growerCopies } from '#drizzle/schema/weigh-ups.ts';
import type { CandidateResult, WeighUp, WeighUpInput, WeighUpResult } from '#shared/weigh-up.ts';
import { noise, publishPlanted } from './small-world.ts';
import { openRecordWorld, type RecordWorld } from './record-world.ts';

let record: RecordWorld;
let elder: string;
beforeAll(async () => {
  record = await openRecordWorld();
  elder = record.variety('Elder');
});
afterAll(() => record.world.close());

type Answer = { weighUp: WeighUp; result: WeighUpResult };

async function answer(change: Partial<WeighUpInput>): Promise<Answer> {
  const { id } = await record.make(change);
  return (await record.advisor.agent.get(`/api/weigh-ups/${id}`).expect(200)).body;
}

const candidateIn = ({ result }: Answer, id: string): CandidateResult => {
  const found = result.candidates.find((one) => one.varietyId === id);
  if (found === undefined) throw new Error(`${id} was not weighed`);
  return found;
};

const width = ({ gap }: CandidateResult): number => (gap ? gap.region.high - gap.region.low : NaN);

const leaders = ({ candidates }: WeighUpResult) =>
  candidates.flatMap(({ varietyName, cautions }) =>
    cautions.filter(({ code }) => code === 'best-of-many').map(({ values }) => ({ varietyName, values })),
  );

describe('what is asked', () => {
  test('is several candidates unless something else is said', async () => {
    const { weighUp, result } = await answer({});
    expect([weighUp.question, result.question, result.comparison]).toEqual(['several', 'several', 'dunnett']);
    expect(result.best ?? null).toBeNull();
  });

  test('about a planned pair is answered without widening, and the leader of no list is warned of', async () => {
    const pair = await answer({ question: 'pair', candidateIds: [elder] });
    expect([pair.weighUp.question, pair.result.question, pair.result.comparison]).toEqual([
      'pair',
      'pair',
      'lsd',
    ]);
    const several = candidateIn(
      await answer({ candidateIds: [elder, record.variety('Birch'), record.variety('Dogwood')] }),
      elder,
    );
    const alone = candidateIn(pair, elder);
    expect(alone.gap?.estimate).toBeCloseTo(several.gap?.estimate ?? NaN, 10);
    expect(width(alone)).toBeLessThan(width(several));
    expect(leaders(pair.result)).toEqual([]);
    expect(pair.result.best ?? null).toBeNull();
  });

  test('about a pair of two candidates is refused by name', async () => {
    const reply = await record.advisor.agent
      .post('/api/weigh-ups')
      .send(record.question({ question: 'pair' }));
    expect(reply.status).toBe(400);
    expect(reply.body.error).toMatchObject({
      code: 'invalid-input',
      issues: [{ path: 'question', reason: 'pair-of-one' }],
    });
  });

  test('changes with the weigh-up under its revision, and another answer is weighed', async () => {
    const { weighUp, result } = await answer({ candidateIds: [elder] });
    const change = (question: WeighUpInput['question'], revision: number) =>
      record.advisor.agent
        .put(`/api/weigh-ups/${weighUp.id}`)
        .send({ revision, weighUp: record.question({ candidateIds: [elder], question }) });
    const changed: Answer = (await change('best', 1).expect(200)).body;
    expect([changed.weighUp.question, changed.result.question]).toEqual(['best', 'best']);
    expect(width(candidateIn(changed, elder))).toBeGreaterThan(
      width(candidateIn({ weighUp, result }, elder)),
    );
    expect((await change('pair', 1)).body.error.code).toBe('revision-conflict');
    expect((await change('pair', 2).expect(200)).body.weighUp).toMatchObject({
      revision: 3,
      question: 'pair',
    });
  });
});

describe('the best of the list', () => {
  test('is looked for among all that stood, and the verdicts are widened for all of them', async () => {
    const best = await answer({ question: 'best', candidateIds: [elder] });
    const all = await answer({
      candidateIds: ['Birch', 'Cedar', 'Dogwood', 'Elder'].map(record.variety),
    });
    expect(best.result.candidates.map(({ varietyId }) => varietyId)).toEqual([elder]);
    expect(best.result.comparison).toBe('dunnett');
    const [ofBest, ofAll] = [best, all].map((weighed) => candidateIn(weighed, elder).gap?.region);
    expect(ofBest?.level).toBe(ofAll?.level);
    // The list stands in another order there, by ids that are drawn anew for every run, and so is summed in another.
    expect(ofBest?.low).toBeCloseTo(ofAll?.low ?? NaN, 12);
    expect(ofBest?.high).toBeCloseTo(ofAll?.high ?? NaN, 12);
    expect(candidateIn(best, elder).verdict).toBe(candidateIn(all, elder).verdict);
  });

  test('tells who can be it: Birch alone, planted far ahead; the current variety is of the list', async () => {
    const { result } = await answer({ question: 'best' });
    const standings = result.best?.standings ?? [];
    expect(standings.map(({ varietyName }) => varietyName).sort()).toEqual([
      'Anchor',
      'Birch',
      'Cedar',
      'Dogwood',
      'Elder',
    ]);
    expect(standings.filter(({ mayBeBest }) => mayBeBest)).toMatchObject([
      { varietyName: 'Birch', isBest: true, interval: { low: 0, level: 0.95 } },
    ]);
    expect(standings[0]?.varietyName).toBe('Birch');
    for (const { interval, mayBeBest } of standings) expect(mayBeBest).toBe(interval.high > 0);
    expect(result.best?.thin).toEqual([]);
  });

  test('warns of the one picked, also where it alone is kept, with the gap pulled back', async () => {
    const birch = record.variety('Birch');
    const alone = await answer({ question: 'best', candidateIds: [birch] });
    const { gap } = candidateIn(alone, birch);
    expect(leaders(alone.result)).toEqual([
      {
        varietyName: 'Birch',
        values: { variety: 'Birch', count: 5, estimate: gap?.estimate, shrunken: gap?.shrunken },
      },
    ]);
    expect(gap?.shrunken).toBeLessThan(gap?.estimate ?? NaN);
    // Neither of these leads the list; of those kept it is Elder that was picked.
    const others = await answer({ question: 'best', candidateIds: [elder, record.variety('Dogwood')] });
    expect(leaders(others.result).map(({ varietyName }) => varietyName)).toEqual(['Elder']);
  });

  test('leaves a variety with too few trials out of it, however far ahead it stands there, and names it', async () => {
    const { small, world } = record;
    for (const season of [2023, 2024, 2025])
      await publishPlanted(world.database.db, small, {
        site: 'heath',
        season,
        entries: ['Anchor', 'Birch', 'Cedar', ...(season === 2025 ? ['Elder'] : [])],
        yieldOf: (entry, rep) => (entry === 'Elder' ? 9 : 5) + 0.3 * noise(rep, season, entry.charCodeAt(0)),
      });
    const south = await world.signInAs('advisor', { regionIds: [small.regionIds.south] });
    const asked = record.question({ question: 'best', regionId: small.regionIds.south });
    const made = (await south.agent.post('/api/weigh-ups').send(asked).expect(200)).body.weighUp;
    const { result }: Answer = (await south.agent.get(`/api/weigh-ups/${made.id}`).expect(200)).body;
    expect(result.best?.standings.map(({ varietyName }) => varietyName).sort()).toEqual([
      'Anchor',
      'Birch',
      'Cedar',
    ]);
    expect(result.best?.standings.every(({ mayBeBest }) => mayBeBest)).toBe(true);
    // Dogwood was kept although it stands in none of these trials.
    expect(result.best?.thin.toSorted()).toEqual(['Dogwood', 'Elder']);
  });

  test('goes into the grower’s copy with who can be it', async () => {
    const { weighUp, result } = await answer({ question: 'best' });
    await record.advisor.agent
      .post(`/api/weigh-ups/${weighUp.id}/grower-copies`)
      .send({ language: 'en' })
      .expect(200);
    const [copy] = await record.world.database.db
      .select({ snapshot: growerCopies.snapshot })
      .from(growerCopies)
      .where(eq(growerCopies.weighUpId, weighUp.id));
    const { snapshot } = copy ?? {};
    expect(snapshot).toMatchObject({
      weighUp: { question: 'best' },
      result: { question: 'best', best: result.best },
    });
  });
});
