import { createInstance, type BackendModule, type i18n as I18n, type ResourceKey } from 'i18next';
import { initReactI18next } from 'react-i18next';
import { language as languageCode, readMe } from '#shared/account.ts';
import { languageCookieName } from '#shared/page-exchange.ts';
import { languages, type Language } from '#shared/language.ts';
import { addSentenceFormats } from '#shared/sentence-formats.ts';
import { ApiError } from './api-client.ts';
import { peekFirstAnswer } from './first-answers.ts';
import type { Namespace } from './locale-resources.ts';
import { tellServer } from './tell-server.ts';

const storageKey = 'gavelrow.language';

/** One file per language: on a line of 400 ms a second one costs more than the sentences of the other pages. */
const sentenceFiles: Record<string, () => Promise<{ sentences: Record<string, ResourceKey> }>> = {
  en: () => import('./sentences-en.ts'),
  fr: () => import('./sentences-fr.ts'),
} satisfies Record<Language, unknown>;

const namespaceOf = (path: string): string => path.replace(/^.*\/|\.json$/g, '');

const localeBackend: BackendModule = {
  type: 'backend',
  init: () => undefined,
  read: (language, namespace, done) => {
    const load = sentenceFiles[language];
    if (!load) {
      done(new Error(`No sentences in ${language}`), false);
      return;
    }
    load().then(
      ({ sentences }) => {
        // The others came along: a part of a page that needs them need not wait for them.
        for (const [path, ofNamespace] of Object.entries(sentences))
          i18n.addResourceBundle(language, namespaceOf(path), ofNamespace);
        done(null, sentences[`/locales/${language}/${namespace}.json`]);
      },
      // `true` asks for another try: signal comes and goes at a kitchen table.
      (failure: unknown) => done(failure instanceof Error ? failure : new Error(String(failure)), true),
    );
  },
};

/** The account's language where it is known, else the one chosen here before, else the browser's, else English. */
function guessLanguage(): Language {
  const ofAccount = peekFirstAnswer(readMe, {})?.me?.language;
  const candidates = [ofAccount, readStoredLanguage(), ...navigator.languages.map((tag) => tag.slice(0, 2))];
  for (const candidate of candidates) {
    const parsed = languageCode.safeParse(candidate);
    if (parsed.success) return parsed.data;
  }
  return 'en';
}

function readStoredLanguage(): string | null {
  try {
    return localStorage.getItem(storageKey);
  } catch {
    // Storage may be refused (private windows): the browser's language serves.
    return null;
  }
}

/** In the storage, and in a cookie for the server: it names the sentences of the page before the page can ask. */
function storeLanguage(language: Language): void {
  tellServer(languageCookieName, language);
  try {
    localStorage.setItem(storageKey, language);
  } catch {
    // Not being able to remember the language must not stop its use.
  }
}

export const i18n: I18n = createInstance();

/** Starts the sentences and keeps `lang` on the page in step with them. */
export async function startI18n(): Promise<void> {
  i18n.on('languageChanged', (tag) => {
    document.documentElement.lang = tag;
  });
  const firstNamespaces: Namespace[] = ['common', 'errors'];
  const language = guessLanguage();
  await i18n
    .use(localeBackend)
    .use(initReactI18next)
    .init({
      lng: language,
      supportedLngs: [...languages],
      fallbackLng: false,
      ns: firstNamespaces,
      defaultNS: 'common',
      interpolation: { escapeValue: false },
      returnNull: false,
    });
  addSentenceFormats(i18n.services.formatter);
  storeLanguage(language);
}

/**
 * Loads the sentences of namespaces in the present language, or of those in use in another one.
 * @throws ApiError `offline` when they do not come, so that a page never shows keys in place of sentences
 */
export async function loadSentences(namespaces: readonly string[], language = i18n.language): Promise<void> {
  await i18n.loadNamespaces(namespaces);
  const findMissing = () => namespaces.filter((namespace) => !i18n.hasResourceBundle(language, namespace));
  if (findMissing().length > 0) await i18n.reloadResources([language], findMissing());
  if (findMissing().length > 0) throw new ApiError('offline', 0);
}

/**
 * Changes the language of the whole page and remembers it in this browser, once all sentences in use are there.
 * @throws ApiError `offline` when they do not come: the page then stays as it is
 */
export async function changeLanguage(language: Language): Promise<void> {
  if (i18n.language !== language) {
    const inUse = [i18n.options.ns ?? []]
      .flat()
      .filter((name) => i18n.hasResourceBundle(i18n.language, name));
    await loadSentences(inUse, language);
    await i18n.changeLanguage(language);
  }
  storeLanguage(language);
}
