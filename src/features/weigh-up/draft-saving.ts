import { useEffect, useRef, useState } from 'react';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useFormState, useWatch, type UseFormReturn } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { useSearchParams } from 'react-router-dom';
import {
  createDraft,
  draftContent,
  saveDraft,
  type DraftContent,
  type WeighUpDraft,
} from '#shared/weigh-up-draft.ts';
import { ApiError, callApi, type CallOptions } from '#src/api-client.ts';
import { showToast } from '#src/components/toaster.tsx';
import { saveFirst } from '#src/save-first.ts';
import { useErrorText } from '#src/use-error-text.ts';
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
 * Keeps what is typed as a draft on the server, a second after the last edit or when the page is left, once there is
 * something typed.
 * @param opened the draft that the page was opened with
 */
export function useDraftSaving(
  form: UseFormReturn<NewWeighUpDraft, unknown, NewWeighUpForm>,
  opened: WeighUpDraft | undefined,
): DraftSaving {
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const client = useQueryClient();
  const { t } = useTranslation('record');
  const errorText = useErrorText();
  const refreshList = () => client.invalidateQueries({ queryKey: draftsQuery.queryKey });
  const held = useRef<WeighUpDraft | null>(opened ?? null);
  const underWay = useRef<Promise<unknown>>(Promise.resolve());
  const leave = useRef((): Promise<unknown> => Promise.resolve());
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
  // One at a time: the revision of one saving is what the next is made over.
  const write = (written: string): Promise<string> => {
    const writing = underWay.current
      .catch(() => undefined)
      .then(() => keep(held.current, draftContent.parse(JSON.parse(written))))
      .then((draft) => {
        held.current = draft;
        return draft.id;
      });
    underWay.current = writing;
    return writing;
  };
  const [saved, setSaved] = useState(opened && { id: opened.id, text: JSON.stringify(opened.content) });
  const {
    mutate,
    error,
    isPending,
    variables: tried,
  } = useMutation({
    mutationFn: write,
    onSuccess: refreshList,
  });
  const isUnsaved = !isStopped && (isDirty || saved !== undefined) && text !== saved?.text;
  useEffect(() => {
    // What was refused waits for the next edit.
    const mayTry = !isPending && (error === null || text !== tried);
    if (!mayTry || !isUnsaved) return undefined;
    const save = () =>
      mutate(text, {
        // Not told any more once the page is left, whose address it would change.
        onSuccess: (id) => {
          setSaved({ id, text });
          patch({ draft: id });
        },
      });
    const timer = setTimeout(save, pause);
    // A page that goes out of sight may never be seen again: closed, or put away on a phone.
    const saveOutOfSight = () => document.visibilityState === 'hidden' && save();
    document.addEventListener('visibilitychange', saveOutOfSight);
    return () => {
      clearTimeout(timer);
      document.removeEventListener('visibilitychange', saveOutOfSight);
    };
  }, [isPending, error, tried, isUnsaved, text, mutate, patch]);
  useEffect(() => {
    leave.current = () => {
      if (!isUnsaved || (isPending && text === tried)) return underWay.current;
      const kept = (id: string) => {
        setSaved({ id, text });
        return refreshList();
      };
      return write(text).then(kept, (reason) => showToast(t('drafts.failed', { reason: errorText(reason) })));
    };
  });
  // For another page of the product, or for signing out, there is no second to wait.
  useEffect(() => () => void leave.current(), []);
  useEffect(() => saveFirst(() => leave.current()), []);
  const stop = async () => {
    setIsStopped(true);
    await underWay.current.catch(() => undefined);
    return held.current?.id ?? null;
  };
  const goOn = () => setIsStopped(false);
  return { draftId: saved?.id ?? null, isKept: text === saved?.text, error, stop, goOn };
}

const lasting: CallOptions = { keepalive: true };

/**
 * Writes on the draft held, or begins one where there is none. One that was written on, deleted or weighed in another
 * tab is left as it stands there, and what is typed here becomes a draft of its own.
 */
async function keep(held: WeighUpDraft | null, content: DraftContent): Promise<WeighUpDraft> {
  if (held !== null) {
    const { id: draftId, revision } = held;
    try {
      return (
        await callApi(saveDraft, { params: { draftId }, body: { revision, content } }, undefined, lasting)
      ).draft;
    } catch (error) {
      if (!(error instanceof ApiError) || !movedElsewhere.has(error.code)) throw error;
    }
  }
  return (await callApi(createDraft, { body: { content } }, undefined, lasting)).draft;
}

const movedElsewhere: ReadonlySet<ApiError['code']> = new Set(['revision-conflict', 'not-found'] as const);
