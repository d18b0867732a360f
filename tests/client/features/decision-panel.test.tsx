import { screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useQueryClient } from '@tanstack/react-query';
import { describe, expect, it, vi } from 'vitest';
import type { Decision, EarlierDecision, SaidOfCandidate } from '#shared/decision.ts';
import { DecisionPanel } from '#src/features/weigh-up/decision-panel.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import {
  buildCandidate,
  buildGap,
  buildResult,
  buildWeighUp,
  currentId,
  idOf,
} from '#tests/client/support/weigh-up-factory.ts';

const weighUp = buildWeighUp();
const result = buildResult([buildCandidate()]);

const saidOfOstermoor: SaidOfCandidate = {
  varietyId: idOf(2),
  varietyName: 'Ostermoor',
  verdict: 'open',
  estimate: 0.21,
  interval: { low: -0.1, high: 0.52, level: 0.95 },
  chancePays: 0.63,
  moneyVerdict: 'toss',
};

const buildDecision = (change: Partial<Decision> = {}): Decision => ({
  choice: 'candidate',
  varietyId: idOf(2),
  varietyName: 'Ostermoor',
  areaHectares: 40,
  reason: 'It stood up in the rain.',
  decidedAt: '2025-12-01T09:00:00.000Z',
  recordedBy: 'Ines Quarrel',
  said: {
    currentVarietyId: currentId,
    currentVarietyName: 'Brindle',
    seasonFrom: 2022,
    seasonTo: 2025,
    trials: 11,
    tickedOff: 0,
    computedAt: '2025-12-01T09:00:00.000Z',
    candidates: [saidOfOstermoor],
  },
  ...change,
});

type Saved = { revision: number; decision: unknown };

function serve(held: { decision: Decision | null; earlier?: EarlierDecision[] }, status = 200): Saved[] {
  const saved: Saved[] = [];
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    if (init.method !== 'PUT') {
      expect(path).toBe(`/api/weigh-ups/${weighUp.id}/decision`);
      return Promise.resolve(Response.json({ earlier: [], ...held }));
    }
    const body: Saved = JSON.parse(String(init.body));
    saved.push(body);
    if (status !== 200)
      return Promise.resolve(Response.json({ error: { code: 'revision-conflict' } }, { status }));
    const decision = body.decision === null ? null : buildDecision();
    return Promise.resolve(Response.json({ weighUp: { ...weighUp, revision: 4 }, decision }));
  });
  return saved;
}

/** As a page does when one turns back to its window. */
function LookAgain() {
  const client = useQueryClient();
  return (
    <button type="button" onClick={() => void client.invalidateQueries()}>
      look again
    </button>
  );
}

const open = async (language: 'en' | 'fr' = 'en', hasUnsaved = false) => {
  const user = userEvent.setup();
  await renderClient(
    <>
      <DecisionPanel weighUp={weighUp} result={result} hasUnsaved={hasUnsaved} />
      <LookAgain />
    </>,
    { language, namespaces: ['record', 'weigh-up', 'verdicts', 'errors', 'common'] },
  );
  return user;
};

describe('the decision on a weigh-up', () => {
  it('is recorded under the revision on the page', async () => {
    const saved = serve({ decision: null });
    const user = await open();
    await user.selectOptions(await screen.findByLabelText('Chosen'), 'Ostermoor');
    expect(screen.getByLabelText('On')).toHaveProperty('value', '120');
    await user.type(screen.getByLabelText('Why'), 'It stood up.');
    await user.click(screen.getByRole('button', { name: 'Record the decision' }));
    expect(await screen.findByText('Ostermoor, on 40 ha')).toBeTruthy();
    expect(saved).toEqual([
      {
        revision: 3,
        decision: { choice: 'candidate', varietyId: idOf(2), areaHectares: 120, reason: 'It stood up.' },
      },
    ]);
  });

  it('asks for no hectares of what is undecided, and says what is missing', async () => {
    const saved = serve({ decision: null });
    const user = await open();
    await user.selectOptions(await screen.findByLabelText('Chosen'), 'Undecided');
    expect(screen.queryByLabelText('On')).toBeNull();
    await user.click(screen.getByRole('button', { name: 'Record the decision' }));
    expect(await screen.findByText(/Please fill this in/)).toBeTruthy();
    await user.type(screen.getByLabelText('Why'), 'Prices first.');
    await user.click(screen.getByRole('button', { name: 'Record the decision' }));
    await waitFor(() => expect(saved).toHaveLength(1));
    expect(saved[0]?.decision).toMatchObject({ choice: 'undecided', areaHectares: null });
  });

  it('takes no more hectares than the weigh-up is about, and says where its area is changed', async () => {
    const saved = serve({ decision: null });
    const user = await open();
    await user.selectOptions(await screen.findByLabelText('Chosen'), 'Ostermoor');
    await user.type(screen.getByLabelText('Why'), 'It stood up.');
    await user.clear(screen.getByLabelText('On'));
    await user.type(screen.getByLabelText('On'), '1 250,50');
    await user.click(screen.getByRole('button', { name: 'Record the decision' }));
    expect(await screen.findByText(/more than the area of this weigh-up/)).toBeTruthy();
    expect(screen.getByLabelText('On')).toBe(document.activeElement);
    await user.clear(screen.getByLabelText('On'));
    await user.type(screen.getByLabelText('On'), '119,5');
    await user.click(screen.getByRole('button', { name: 'Record the decision' }));
    await waitFor(() => expect(saved).toHaveLength(1));
    expect(saved[0]?.decision).toMatchObject({ areaHectares: 119.5 });
  });

  it('recorded in another tab meanwhile, it is shown, and what is being written here stays', async () => {
    const elsewhere: { decision: Decision | null } = { decision: null };
    serve(elsewhere);
    const user = await open();
    await user.type(await screen.findByLabelText('Why'), 'It stood up well.');
    elsewhere.decision = buildDecision();
    await user.click(screen.getByRole('button', { name: 'look again' }));
    expect(await screen.findByText('It stood up in the rain.')).toBeTruthy();
    expect(screen.getByLabelText('Why')).toHaveProperty('value', 'It stood up well.');
  });

  it('waits for the numbers to be saved, as a copy does', async () => {
    serve({ decision: null });
    await open('en', true);
    expect(await screen.findByRole('button', { name: 'Record the decision' })).toHaveProperty(
      'disabled',
      true,
    );
  });

  it('shows beside it what was said then and what is said now', async () => {
    serve({ decision: null, earlier: [{ weighUpId: idOf(91), decision: buildDecision() }] });
    await open();
    expect(
      await screen.findByRole('heading', { name: 'Decided on the evidence of 2022 to 2025' }),
    ).toBeTruthy();
    expect(screen.getByText('It stood up in the rain.')).toBeTruthy();
    expect(screen.getByText(/Not settled/)).toBeTruthy();
    expect(screen.getByText(/Really ahead/)).toBeTruthy();
    expect(screen.getByText('pays in 63 of 100')).toBeTruthy();
    expect(
      screen.getByText(/\+0.21 t\/ha, between −0.10 t\/ha and \+0.52 t\/ha \(95% interval/),
    ).toBeTruthy();
    expect(screen.getByText(/\+0.40 t\/ha, between/)).toBeTruthy();
  });

  it('keeps still while nothing has moved, and does not hold gaps to different varieties together', async () => {
    const { said } = buildDecision();
    const { gap, money } = buildCandidate({ gap: buildGap(0.4, 0.2) });
    const same: SaidOfCandidate = {
      ...saidOfOstermoor,
      verdict: 'ahead',
      estimate: gap?.estimate ?? null,
      chancePays: money?.chancePays ?? null,
    };
    const stored = buildDecision({ said: { ...said, candidates: [same] } });
    const other = { ...said, currentVarietyId: idOf(40), currentVarietyName: 'Fallow' };
    serve({ decision: stored, earlier: [{ weighUpId: idOf(91), decision: buildDecision({ said: other }) }] });
    await open();
    expect(await screen.findAllByRole('table')).toHaveLength(1);
    expect(screen.getByText('not weighed against it now')).toBeTruthy();
    expect(screen.getByText(/Then the gaps were measured from Fallow/)).toBeTruthy();
  });

  it('is taken back only once it was said what goes with it', async () => {
    const saved = serve({ decision: buildDecision() });
    const user = await open();
    await user.click(await screen.findByRole('button', { name: 'Take it back' }));
    const dialog = within(screen.getByRole('dialog', { name: 'Take this decision back?' }));
    expect(dialog.getByText(/what the evidence said on 1 December 2025/)).toBeTruthy();
    await user.click(dialog.getByRole('button', { name: 'Cancel' }));
    expect(screen.queryByRole('dialog')).toBeNull();
    expect(saved).toEqual([]);
    await user.click(screen.getByRole('button', { name: 'Take it back' }));
    await user.click(within(screen.getByRole('dialog')).getByRole('button', { name: 'Take it back' }));
    await waitFor(() => expect(saved).toEqual([{ revision: 3, decision: null }]));
    await waitFor(() => expect(screen.queryByRole('dialog')).toBeNull());
  });

  it('says before it is changed that what was said then is lost, where the evidence has moved', async () => {
    serve({ decision: buildDecision() });
    const user = await open();
    const loses = /moved since 1 December 2025. Recorded again/;
    expect(await screen.findByText('Ostermoor, on 40 ha')).toBeTruthy();
    expect(screen.queryByText(loses)).toBeNull();
    await user.click(screen.getByRole('button', { name: 'Change the decision' }));
    expect(screen.getByText(loses)).toBeTruthy();
  });

  it('overwrites nothing where somebody saved in between', async () => {
    const saved = serve({ decision: buildDecision() }, 409);
    const user = await open();
    await user.click(await screen.findByRole('button', { name: 'Take it back' }));
    await user.click(within(screen.getByRole('dialog')).getByRole('button', { name: 'Take it back' }));
    await waitFor(() => expect(saved).toHaveLength(1));
    expect(await screen.findByRole('alert')).toBeTruthy();
    expect(screen.getByText('Ostermoor, on 40 ha')).toBeTruthy();
  });

  it('speaks French', async () => {
    serve({ decision: buildDecision({ choice: 'current', varietyId: null, varietyName: 'Brindle' }) });
    await open('fr');
    expect(await screen.findByText(/Brindle, comme avant, sur 40\sha/)).toBeTruthy();
  });
});
