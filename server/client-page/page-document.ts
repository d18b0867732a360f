import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { readBuiltFiles, readInlineStyle } from '#server/built-files.ts';
import { firstAnswersId, type FirstAnswers } from '#shared/page-exchange.ts';
import { languages, type Language } from '#shared/language.ts';
import { clientPages, type PageNeeds } from './page-needs.ts';

const fontsSource = 'src/fonts.css';
const afterPaintSource = 'src/start-after-paint.ts';

type Manifest = Record<string, { file: string; imports?: string[] }>;

/** The built client's one document, with what a page needs named and answered in it. */
export type PageDocument = {
  /** Of the style that a page with a first view has in itself, for the security policy. */
  styleHash: string;
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
  const addressOf = readBuiltFiles(clientFolder);
  const document = readFileSync(join(clientFolder, 'index.html'), 'utf8').replace(
    `href="/${fontsSource}"`,
    `href="${addressOf(fontsSource)}"`,
  );
  const [styleLink, styleAddress] = findOnce(
    document,
    /<link rel="stylesheet"[^>]*href="([^"]*\/base-[^"]*)"[^>]*>/,
  );
  const [entryScript, entryAddress] = findOnce(
    document,
    /<script type="module"[^>]*src="([^"]*)"[^>]*><\/script>/,
  );
  const style = readInlineStyle(join(clientFolder, styleAddress));
  /** What is seen first waits for no style, and the client's start for what is seen first. */
  const hurry = (page: string): string =>
    page
      .replace(styleLink, () => `<style>${style.text}</style>`)
      .replace(
        entryScript,
        () =>
          `<link rel="modulepreload" crossorigin href="${entryAddress}" />` +
          `<script type="module" crossorigin src="${addressOf(afterPaintSource)}" data-starts="${entryAddress}"></script>`,
      );
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
    styleHash: style.hash,
    write: (page, language, answers, firstView) => {
      const links = new Set([preloads.get(sentencesOf(language)), page && preloads.get(page.source)]);
      const data = `<script type="application/json" id="${firstAnswersId}">${writeJson(answers)}</script>`;
      // Functions, because a replacement text would give `$` in a reply a meaning.
      return (firstView === '' ? document : hurry(document))
        .replace('</head>', () => `${[...links].join('')}</head>`)
        .replace('<html lang="en">', `<html lang="${language}">`)
        .replace('<div id="root"></div>', () => `<div id="root">${firstView}</div>${data}`);
    },
  };
}

/** The match and its one group. @throws when the built document has no such part */
function findOnce(document: string, part: RegExp): [whole: string, group: string] {
  const [whole, group] = part.exec(document) ?? [];
  if (whole === undefined || group === undefined) throw new Error(`the built document has no ${part.source}`);
  return [whole, group];
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
