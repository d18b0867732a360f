/** What stands in a sentence: figures already written, or numbers that the sentence itself formats. */
export type SentenceValues = Readonly<Record<string, string | number>>;

/**
 * Says a sentence of locales/ in one language. Shared code names the keys that it may ask for; the page's own `t` is
 * one such function, so that a key without a sentence does not compile.
 */
export type Say<Key extends string> = (key: Key, values?: SentenceValues) => string;
