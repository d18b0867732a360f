import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { firstAnswersId, type FirstAnswers } from '#shared/page-exchange.ts';
import { languages, type Language } from '#shared/language.ts';
import { clientPages, type PageNeeds } from './page-needs.ts';

type Manifest = Record<string, { file: string; imports?: string[] }>;

/** The built client's one document, with what a page needs named and answered in it. */
export type PageDocument = {
  /**
   * @param page whose code and sentences are fetched along with what every page needs; null for none
   * @param answers replies that the page finds in itself instead of asking for them
   * @param firstView HTML that is seen until the client has rendered the page; may be empty
   */
  write: (page: PageNeeds | null, language: Language, answers: FirstAnswers, firstView: string) => string;
};

/**
 * Reads the document of the built client and what its files are called.
 * @param clientFolder of the build
 * @throws when the build has no such page
 */
export function openPageDocument(clientFolder: string): PageDocument {
  const document = readFileSync(join(clientFolder, 'index.html'), 'utf8');
  const manifest = JSON.parse(readFileSync(join(clientFolder, '.vite/manifest.json'), 'utf8')) as Manifest;
  const preloads = new Map<string, string>();
  for (const source of [...clientPages.map((page) => page.source), ...languages.map(sentencesOf)]) {
    const files = filesBehind(manifest, source).filter((file) => !document.includes(file));
    preloads.set(
      source,
      files.map((file) => `<link rel="modulepreload" crossorigin href="/${file}" />`).join(''),
    );
  }
  return {
    write: (page, language, answers, firstView) => {
      const links = new Set([preloads.get(sentencesOf(language)), page && preloads.get(page.source)]);
      const data = `<script type="application/json" id="${firstAnswersId}">${writeJson(answers)}</script>`;
      // Functions, because a replacement text would give `$` in a reply a meaning.
      return document
        .replace('</head>', () => `${[...links].join('')}</head>`)
        .replace('<html lang="en">', `<html lang="${language}">`)
        .replace('<div id="root"></div>', () => `<div id="root">${firstView}</div>${data}`);
    },
  };
}

const sentencesOf = (language: Language): string => `src/sentences-${language}.ts`;

/** The file of a source and of all that it imports at once. */
function filesBehind(manifest: Manifest, source: string, found = new Set<string>()): string[] {
  const built = manifest[source];
  if (built === undefined) throw new Error(`the build does not say what ${source} became`);
  if (!found.has(built.file)) {
    found.add(built.file);
    for (const imported of built.imports ?? []) filesBehind(manifest, imported, found);
  }
  return [...found];
}

/** JSON that can stand inside a script element: no text in it can end the element or begin a comment. */
const writeJson = (value: unknown): string => JSON.stringify(value).replaceAll('<', '\\u003c');
