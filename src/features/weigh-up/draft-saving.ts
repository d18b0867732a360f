import { useEffect, useRef, useState } from 'react';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useFormState, useWatch, type UseFormReturn } from 'react-hook-form';
import { useSearchParams } from 'react-router-dom';
import {
  createDraft,
  draftContent,
  saveDraft,
  type DraftContent,
  type WeighUpDraft,
} from '#shared/weigh-up-draft.ts';
import { callApi } from '#src/api-client.ts';
import { useUrlPatch } from '#src/url-state.ts';
import type { NewWeighUpDraft, NewWeighUpForm } from './new-weigh-up-form.ts';
import { draftsQuery } from './weigh-up-queries.ts';

/** Saved this long after the last edit, ms. */
const pause = 1000;

const prices = ['priceLow', 'priceMiddle', 'priceHigh'] as const;

/** The form as a draft holds it: prices of the sheet are left to the sheet. */
export function toFormDraft(content: DraftContent | undefined): NewWeighUpDraft {
  return {
    growerName: content?.growerName ?? '',
    farmName: content?.farmName ?? '',
    areaHectares: content?.areaHectares ?? null,
    usualYield: content?.usualYield ?? null,
    priceLow: null,
    priceMiddle: null,
    priceHigh: null,
  };
}

/** Puts a draft's prices over those of the sheet, as if they had just been typed. */
export function typePrices(
  form: UseFormReturn<NewWeighUpDraft, unknown, NewWeighUpForm>,
  content: DraftContent | undefined,
): void {
  for (const name of prices) {
    const price = content?.[name] ?? null;
    if (price !== null) form.setValue(name, price, { shouldDirty: true });
  }
}

/** The address's query without the draft that it names: the question alone. */
export function questionOf(search: URLSearchParams): string {
  const question = new URLSearchParams(search);
  question.delete('draft');
  return question.toString();
}

/** What is typed may be no figure yet (NaN): a draft does not keep that. */
const figureOf = (value: number | null | undefined): number | null =>
  typeof value === 'number' && Number.isFinite(value) ? value : null;

/**
 * Keeps what is typed as a draft on the server, a second after the last edit, once there is something typed.
 * @param opened the draft that the page was opened with
 * @returns the draft's id, null before the first saving; whether it is kept as it stands; what went wrong
 */
export function useDraftSaving(
  form: UseFormReturn<NewWeighUpDraft, unknown, NewWeighUpForm>,
  opened: WeighUpDraft | undefined,
): { draftId: string | null; isKept: boolean; error: Error | null } {
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const client = useQueryClient();
  const held = useRef<WeighUpDraft | null>(opened ?? null);
  const typed = useWatch({ control: form.control });
  const { isDirty, dirtyFields } = useFormState({ control: form.control });
  const content: DraftContent = {
    question: questionOf(search),
    growerName: typed.growerName ?? '',
    farmName: typed.farmName ?? '',
    areaHectares: figureOf(typed.areaHectares),
    usualYield: figureOf(typed.usualYield),
    priceLow: dirtyFields.priceLow ? figureOf(typed.priceLow) : null,
    priceMiddle: dirtyFields.priceMiddle ? figureOf(typed.priceMiddle) : null,
    priceHigh: dirtyFields.priceHigh ? figureOf(typed.priceHigh) : null,
  };
  const text = JSON.stringify(content);
  const [saved, setSaved] = useState(opened && { id: opened.id, text: JSON.stringify(opened.content) });
  const { mutate, error } = useMutation({
    // One at a time: the revision of one saving is what the next is made over.
    scope: { id: 'weigh-up-draft' },
    mutationFn: async (written: string) => {
      held.current = await keep(held.current, draftContent.parse(JSON.parse(written)));
      return held.current.id;
    },
    onSuccess: () => client.invalidateQueries({ queryKey: draftsQuery.queryKey }),
  });
  const isWorthKeeping = isDirty || saved !== undefined;
  useEffect(() => {
    if (!isWorthKeeping || text === saved?.text) return undefined;
    const save = () =>
      mutate(text, {
        // Not told any more once the page is left, whose address it would change.
        onSuccess: (id) => {
          setSaved({ id, text });
          patch({ draft: id });
        },
      });
    const timer = setTimeout(save, pause);
    return () => clearTimeout(timer);
  }, [isWorthKeeping, text, saved, mutate, patch]);
  return { draftId: saved?.id ?? null, isKept: text === saved?.text, error };
}

/** Writes on the draft held, or begins one where there is none. */
async function keep(held: WeighUpDraft | null, content: DraftContent): Promise<WeighUpDraft> {
  if (held === null) return (await callApi(createDraft, { body: { content } })).draft;
  const { id: draftId, revision } = held;
  return (await callApi(saveDraft, { params: { draftId }, body: { revision, content } })).draft;
}
