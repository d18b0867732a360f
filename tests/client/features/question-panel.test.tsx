import { screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useQuery } from '@tanstack/react-query';
import { useLocation, useSearchParams } from 'react-router-dom';
import { describe, expect, it, vi } from 'vitest';
import { questionKinds } from '#shared/question-kind.ts';
import type { WeighUp } from '#shared/weigh-up.ts';
import { PairCandidateField } from '#src/features/weigh-up/pair-candidate-field.tsx';
import { readQuestion } from '#src/features/weigh-up/question-draft.ts';
import { QuestionFields } from '#src/features/weigh-up/question-fields.tsx';
import { QuestionPanel } from '#src/features/weigh-up/question-panel.tsx';
import { weighUpQuery } from '#src/features/weigh-up/weigh-up-queries.ts';
import { meQuery } from '#src/session.ts';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildCandidate, buildResult, buildWeighUp, idOf } from '#tests/client/support/weigh-up-factory.ts';

type Saved = { revision: number; weighUp: Record<string, unknown> };

/** Answers like the server: holds one weigh-up, and refuses a save over another revision. */
function serve(held: WeighUp): { saved: Saved[]; saveElsewhere: (change: Partial<WeighUp>) => void } {
  let now = held;
  const saved: Saved[] = [];
  vi.stubGlobal('fetch', (_path: string, init: RequestInit = {}) => {
    if (init.method === 'PUT') {
      const body: Saved = JSON.parse(String(init.body));
      if (body.revision !== now.revision)
        return Promise.resolve(Response.json({ error: { code: 'revision-conflict' } }, { status: 409 }));
      saved.push(body);
      now = { ...now, ...body.weighUp, revision: now.revision + 1 };
    }
    return Promise.resolve(Response.json({ weighUp: now, result: buildResult([]) }));
  });
  return {
    saved,
    saveElsewhere: (change) => {
      now = { ...now, ...change, revision: now.revision + 1 };
    },
  };
}

function Page({ id }: { id: string }) {
  const { data, refetch } = useQuery(weighUpQuery(id));
  return data ? (
    <>
      <QuestionPanel weighUp={data.weighUp} hasUnsaved={false} />
      <button type="button" onClick={() => void refetch()}>
        refetch
      </button>
      <output aria-label="revision">{data.weighUp.revision}</output>
    </>
  ) : null;
}

async function open(change: Partial<WeighUp> = {}) {
  const weighUp = buildWeighUp(change);
  const served = serve(weighUp);
  await renderClient(<Page id={weighUp.id} />, { namespaces: ['weigh-up', 'errors'] });
  const save = await screen.findByRole('button', { name: 'Weigh again for this question' });
  const user = userEvent.setup();
  // As when the window is looked at again.
  const refetch = async () => {
    await user.click(screen.getByRole('button', { name: 'refetch' }));
    await waitFor(() => expect(screen.getByLabelText('revision').textContent).toBe('4'));
  };
  return { ...served, user, save, refetch };
}

describe('the question of a weigh-up', () => {
  it('is changed and saved with all the rest of the weigh-up under its revision', async () => {
    const { saved, user, save } = await open();
    expect(screen.getByRole('radio', { name: /These candidates/ })).toHaveProperty('checked', true);
    expect(save).toHaveProperty('disabled', true);
    await user.click(screen.getByRole('radio', { name: /The best of the list/ }));
    await user.click(save);
    await waitFor(() => expect(saved).toHaveLength(1));
    expect(saved[0]).toMatchObject({
      revision: 3,
      weighUp: { question: 'best', growerName: 'Maren Oske', areaHectares: 120 },
    });
    await waitFor(() => expect(save).toHaveProperty('disabled', true));
    expect(screen.getByRole('radio', { name: /The best of the list/ })).toHaveProperty('checked', true);
  });

  it('is no pair of two candidates, and says why', async () => {
    await open({ candidateIds: [idOf(2), idOf(3)] });
    const pair = screen.getByRole('radio', { name: /One planned pair/ });
    expect(pair).toHaveProperty('disabled', true);
    expect(screen.getByText(/A pair takes exactly one candidate; this weigh-up has 2\./)).toBeTruthy();
  });

  it('meets what was saved in another tab: shows it, keeps the choice, and saves over it only when asked again', async () => {
    const { saved, saveElsewhere, user, save } = await open();
    saveElsewhere({ areaHectares: 77 });
    await user.click(screen.getByRole('radio', { name: /One planned pair/ }));
    await user.click(save);
    expect(await screen.findByText(/saved this weigh-up in the meantime/)).toBeTruthy();
    expect(saved).toHaveLength(0);
    expect(screen.getByRole('radio', { name: /One planned pair/ })).toHaveProperty('checked', true);
    await waitFor(() => expect(save).toHaveProperty('disabled', false));
    await user.click(save);
    await waitFor(() => expect(saved).toHaveLength(1));
    expect(saved[0]).toMatchObject({ revision: 4, weighUp: { question: 'pair', areaHectares: 77 } });
  });
});

describe('a panel whose part was changed elsewhere, and which the page shows already', () => {
  it('still meets the conflict: what somebody chose is not overwritten unseen', async () => {
    const { saved, saveElsewhere, user, save, refetch } = await open();
    await user.click(screen.getByRole('radio', { name: /One planned pair/ }));
    saveElsewhere({ question: 'best' });
    await refetch();
    await user.click(save);
    expect(await screen.findByText(/saved this weigh-up in the meantime/)).toBeTruthy();
    expect(saved).toHaveLength(0);
  });

  it('does not mind what was saved beside it', async () => {
    const { saved, saveElsewhere, user, save, refetch } = await open();
    await user.click(screen.getByRole('radio', { name: /One planned pair/ }));
    saveElsewhere({ areaHectares: 77 });
    await refetch();
    await user.click(save);
    await waitFor(() => expect(saved).toHaveLength(1));
    expect(saved[0]).toMatchObject({ revision: 4, weighUp: { question: 'pair', areaHectares: 77 } });
  });
});

const variety = (n: number, name: string) => ({
  ...{ id: idOf(n), name, aliases: [], isCheck: false },
  firstSeason: null,
});
const catalogue = {
  ...{ regions: [], sites: [], places: [] },
  crops: [
    {
      ...{ id: idOf(80), slug: 'pea', name: { en: 'Pea', fr: 'Pois' }, eppoCode: 'PIBSX' },
      ...{ standardMoisturePercent: 16, bushelWeightLb: 60, cvLimitPercent: 18, traits: [] },
      ...{ varieties: [variety(1, 'Brindle'), variety(2, 'Ostermoor'), variety(3, 'Anvil')] },
      seasons: [2026],
    },
  ],
};

function NewQuestion() {
  const [search] = useSearchParams();
  const draft = readQuestion(search, catalogue);
  return (
    <>
      {useQuery({ ...meQuery, queryFn: () => me, initialData: me }).data && (
        <QuestionFields draft={draft} catalogue={catalogue} />
      )}
      {draft.kind === 'pair' && (
        <PairCandidateField
          candidates={[buildCandidate(), buildCandidate({ varietyId: idOf(3), varietyName: 'Anvil' })]}
          chosenId={draft.candidateIds[0]}
        />
      )}
      <output aria-label="address">{useLocation().search}</output>
    </>
  );
}
const me = {
  ...{ id: idOf(9), name: 'Ines', email: 'ines@example.org', language: 'en' as const },
  ...{ role: 'advisor' as const, regionIds: [], phone: null },
};

describe('the question of a new weigh-up', () => {
  it('stands in the address; a pair is chosen by name alone, and what was kept before comes back with its question', async () => {
    const kept = `${idOf(2)}%2C${idOf(3)}`;
    await renderClient(<NewQuestion />, {
      at: `/weigh-ups/new?crop=pea&current=${idOf(1)}&candidates=${kept}`,
      namespaces: ['weigh-up', 'errors'],
    });
    const user = userEvent.setup();
    const address = () => screen.getByLabelText('address').textContent;
    await user.click(screen.getByRole('radio', { name: /One planned pair/ }));
    expect(address()).toContain('question=pair');
    const field = screen.getByLabelText<HTMLSelectElement>(/The candidate of the pair/);
    expect(field.value).toBe('');
    expect([...field.options].map(({ text }) => text)).toEqual(['Choose a variety', 'Anvil', 'Ostermoor']);
    await user.click(screen.getByRole('radio', { name: /These candidates/ }));
    expect(address()).not.toContain('question=');
    expect(readQuestion(new URLSearchParams(address() ?? ''), catalogue).candidateIds).toEqual([
      idOf(2),
      idOf(3),
    ]);
    await user.click(screen.getByRole('radio', { name: /One planned pair/ }));
    await user.selectOptions(screen.getByLabelText(/The candidate of the pair/), 'Anvil');
    expect(readQuestion(new URLSearchParams(address() ?? ''), catalogue)).toMatchObject({
      kind: 'pair',
      candidateIds: [idOf(3)],
    });
  });

  it('reads no question that there is none of', () => {
    for (const kind of questionKinds)
      expect(readQuestion(new URLSearchParams({ question: kind }), catalogue).kind).toBe(kind);
    expect(readQuestion(new URLSearchParams({ question: 'all' }), catalogue).kind).toBe('several');
  });
});
