import { screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeAll, describe, expect, it, vi } from 'vitest';
import type { UsedTrial, WeighUp } from '#shared/weigh-up.ts';
import { EvidenceTrials } from '#src/components/evidence-trials.tsx';
import { Toaster } from '#src/components/toaster.tsx';
import { TickOffStep } from '#src/features/weigh-up/tick-off.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildResult, buildWeighUp, idOf } from '#tests/client/support/weigh-up-factory.ts';

const trial = (n: number, siteName: string): UsedTrial => ({
  trialId: idOf(n),
  name: `${siteName} 2025`,
  siteName,
  season: 2025,
  version: 1,
  sha256: 'ab',
  meanYield: 4.2,
  cvPercent: 7,
});

const elm = trial(11, 'Elmgate');
const fir = trial(12, 'Firholt');
const reason = 'Hail in July.';
const out = { trialId: fir.trialId, reason };
const result = {
  ...buildResult([]),
  trials: [elm],
  leftOut: [{ ...fir, reason: 'ticked-off' as const, reasonText: reason }],
};

/** Keeps what was saved; refuses with a conflict when told to. */
function serve(status = 200): unknown[] {
  const saved: unknown[] = [];
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    const body = JSON.parse(String(init.body));
    saved.push([init.method, path, body]);
    return Promise.resolve(
      status === 200
        ? Response.json({ weighUp: { ...buildWeighUp(), tickedOff: body.tickedOff }, result })
        : Response.json({ error: { code: 'revision-conflict' } }, { status }),
    );
  });
  return saved;
}

const open = async (language: 'en' | 'fr' = 'en', change: Partial<WeighUp> = {}) => {
  const user = userEvent.setup();
  const weighUp = buildWeighUp({ tickedOff: [out], ...change });
  await renderClient(
    <>
      <EvidenceTrials result={result} stepOf={(one) => <TickOffStep weighUp={weighUp} trial={one} />} />
      <Toaster />
    </>,
    { language, namespaces: ['record', 'method', 'errors', 'common'] },
  );
  return user;
};

beforeAll(() => {
  // jsdom knows the element but not its methods.
  HTMLDialogElement.prototype.showModal = function showModal() {
    this.open = true;
  };
});
const path = `/api/weigh-ups/${buildWeighUp().id}/ticked-off`;

describe('ticking a trial off', () => {
  it('asks for a reason, and saves it beside those ticked off already', async () => {
    const saved = serve();
    const user = await open();
    await user.click(screen.getByRole('button', { name: 'Tick off the trial at Elmgate, 2025' }));
    const dialog = within(screen.getByRole('dialog'));
    await user.click(dialog.getByRole('button', { name: 'Tick it off' }));
    expect(dialog.getByText('Please fill this in.')).toBeTruthy();
    expect(document.activeElement).toBe(dialog.getByLabelText('Why should it not count?'));
    expect(saved).toEqual([]);
    await user.type(dialog.getByLabelText('Why should it not count?'), 'Wrong field.');
    await user.click(dialog.getByRole('button', { name: 'Tick it off' }));
    await waitFor(() => expect(saved).toHaveLength(1));
    const tickedOff = [out, { trialId: elm.trialId, reason: 'Wrong field.' }];
    expect(saved[0]).toEqual(['PUT', path, { revision: 3, tickedOff }]);
    expect(await screen.findByText(/weighed without it/)).toBeTruthy();
  });

  it('shows the reason among the trials left out, and counts the trial again with one click', async () => {
    const saved = serve();
    const user = await open();
    expect(screen.getByText('“Hail in July.”')).toBeTruthy();
    await user.click(screen.getByRole('button', { name: 'Count the trial at Firholt, 2025, again' }));
    await waitFor(() => expect(saved).toEqual([['PUT', path, { revision: 3, tickedOff: [] }]]));
    expect(await screen.findByText('The trial counts again.')).toBeTruthy();
  });

  it('says so where somebody saved in between, and keeps what was typed', async () => {
    serve(409);
    const user = await open();
    await user.click(screen.getByRole('button', { name: 'Tick off the trial at Elmgate, 2025' }));
    const field = screen.getByLabelText('Why should it not count?');
    await user.type(field, 'Wrong field.');
    await user.click(screen.getByRole('button', { name: 'Tick it off' }));
    expect(await screen.findByRole('alert')).toBeTruthy();
    expect(field).toHaveProperty('value', 'Wrong field.');
  });

  it('speaks French', async () => {
    serve();
    await open('fr');
    expect(screen.getByText(/Hail/).textContent).toBe('«\u202fHail in July.\u202f»');
    expect(screen.getByRole('button', { name: 'Décocher l’essai de Elmgate, 2025' })).toBeTruthy();
  });
});
