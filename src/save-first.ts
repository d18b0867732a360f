/** What writes away at once what its page has not kept yet; settled when nothing is under way any more. */
type Save = () => Promise<unknown>;

const saves = new Set<Save>();

/**
 * Has something kept before the person signs out, after which the server would refuse it.
 * @returns takes it off again
 */
export function saveFirst(save: Save): () => void {
  saves.add(save);
  return () => void saves.delete(save);
}

/** Keeps all that pages have not kept yet. What fails is told by its page, and holds nobody up. */
export async function saveAll(): Promise<void> {
  await Promise.allSettled([...saves].map((save) => save()));
}
