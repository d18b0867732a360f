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
import { ApiError, callApi } from '#src/api-client.ts';
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

export type DraftSaving = {
  /** null before the first saving */
  draftId: string | null;
  /** Whether the draft is kept as it stands. */
  isKept: boolean;
  error: Error | null;
  /** Ends the saving, since the draft becomes a weigh-up; waits for the one under way, and gives the draft's id, if there is one. */
  stop: () => Promise<string | null>;
  /** Goes on saving: the draft did not become a weigh-up. */
  goOn: () => void;
};

/**
 * Keeps what is typed as a draft on the server, a second after the last edit, once there is something typed.
 * @param opened the draft that the page was opened with
 */
export function useDraftSaving(
  form: UseFormReturn<NewWeighUpDraft, unknown, NewWeighUpForm>,
  opened: WeighUpDraft | undefined,
): DraftSaving {
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const client = useQueryClient();
  const held = useRef<WeighUpDraft | null>(opened ?? null);
  const underWay = useRef<Promise<unknown> | null>(null);
  const [isStopped, setIsStopped] = useState(false);
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
  const {
    mutate,
    error,
    isPending,
    variables: tried,
  } = useMutation({
    mutationFn: async (written: string) => {
      const writing = keep(held.current, draftContent.parse(JSON.parse(written)));
      underWay.current = writing;
      held.current = await writing;
      return held.current.id;
    },
    onSuccess: () => client.invalidateQueries({ queryKey: draftsQuery.queryKey }),
  });
  const isWorthKeeping = isDirty || saved !== undefined;
  useEffect(() => {
    // One at a time: the revision of one saving is what the next is made over. What was refused waits for the next edit.
    const mayTry = !isStopped && !isPending && (error === null || text !== tried);
    if (!mayTry || !isWorthKeeping || text === saved?.text) return undefined;
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
  }, [isStopped, isPending, error, tried, isWorthKeeping, text, saved, mutate, patch]);
  const stop = async () => {
    setIsStopped(true);
    await underWay.current?.catch(() => undefined);
    return held.current?.id ?? null;
  };
  const goOn = () => setIsStopped(false);
  return { draftId: saved?.id ?? null, isKept: text === saved?.text, error, stop, goOn };
}

/**
 * Writes on the draft held, or begins one where there is none. One that was written on, deleted or weighed in another
 * tab is left as it stands there, and what is typed here becomes a draft of its own.
 */
async function keep(held: WeighUpDraft | null, content: DraftContent): Promise<WeighUpDraft> {
  if (held !== null) {
    const { id: draftId, revision } = held;
    try {
      return (await callApi(saveDraft, { params: { draftId }, body: { revision, content } })).draft;
    } catch (error) {
      if (!(error instanceof ApiError) || !movedElsewhere.has(error.code)) throw error;
    }
  }
  return (await callApi(createDraft, { body: { content } })).draft;
}

const movedElsewhere: ReadonlySet<ApiError['code']> = new Set(['revision-conflict', 'not-found'] as const);
