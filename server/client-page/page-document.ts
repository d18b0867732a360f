import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { readBuiltFiles, readInlineFile, type InlineFile } from '#server/built-files.ts';
import { firstAnswersId, verdictId, type FirstAnswers } from '#shared/page-exchange.ts';
import { languages, type Language } from '#shared/language.ts';
import { clientPages, everyPageAsks, type PageNeeds } from './page-needs.ts';

const fontsSource = 'src/fonts.css';
const afterPaintSource = 'src/start-after-paint.ts';
const topStyleSource = 'src/features/weigh-up/first-view.css';

type Manifest = Record<string, { file: string; imports?: string[] }>;

/** The built client's one document, with what a page needs named and answered in it. */
export type PageDocument = {
  /** What a page with a first view has in itself. */
  style: InlineFile;
  /** Its first part, which hangs on nothing but the language. */
  begin: (language: Language) => string;
  /**
   * The rest.
   * @param page whose code and sentences are fetched along with what every page needs; null for none
   * @param answers replies that the page finds in itself instead of asking for them; where it has a first view, it asks
   *   for all but who is signed in as soon as that is painted: a slow phone would read them before it paints anything
   * @param firstView HTML that is seen until the client has rendered the page; may be empty
   */
  goOn: (page: PageNeeds | null, language: Language, answers: FirstAnswers, firstView: string) => string;
};

/**
 * Reads the document of the built client and what its files are called.
 * @param clientFolder of the build
 * @throws when the build has no such page
 */
export function openPageDocument(clientFolder: string): PageDocument {
  const addressOf = readBuiltFiles(clientFolder);
  const whole = readFileSync(join(clientFolder, 'index.html'), 'utf8');
  const titleAt = whole.indexOf('<title>');
  const begin = whole.slice(0, titleAt);
  const document = whole.slice(titleAt).replace(`href="/${fontsSource}"`, `href="${addressOf(fontsSource)}"`);
  const [styleLink, styleAddress] = findOnce(document, linkedStyle('base'));
  const [entryScript, entryAddress] = findOnce(
    document,
    /<script type="module"[^>]*src="([^"]*)"[^>]*><\/script>/,
  );
  const [fontsLink, fontsAddress] = findOnce(document, linkedStyle('fonts'));
  const inPage = (source: string) => readInlineFile(join(clientFolder, addressOf(source)));
  const style = inPage(topStyleSource);
  const afterPaint = inPage(afterPaintSource);
  const manifest = JSON.parse(readFileSync(join(clientFolder, '.vite/manifest.json'), 'utf8')) as Manifest;
  const ahead = new Map<string, readonly string[]>();
  for (const source of [...clientPages.map((page) => page.source), ...languages.map(sentencesOf)])
    ahead.set(
      source,
      filesBehind(manifest, source).map((file) => `/${file}`),
    );
  const ofEveryPage = filesBehind(manifest, 'index.html').map((file) => `/${file}`);

  /** The files are fetched while the document still comes. */
  const withFiles = (files: readonly string[]): string => {
    const links = files.filter((file) => !ofEveryPage.includes(file)).map(linkAhead);
    return document.replace('</head>', () => `${links.join('')}</head>`);
  };
  /** What is seen first waits for no file, and all files for what is seen first. */
  const withTop = (files: readonly string[], asks: readonly string[]): string => {
    const all = [...new Set([...ofEveryPage, ...files])].join(' ');
    const names = `data-styles="${styleAddress} ${fontsAddress}" data-asks="${asks.join(' ')}" data-ahead="${all}" data-starts="${entryAddress}"`;
    return document
      .replace(styleLink, () => `<style>${style.text}</style>${awaitVerdict}`)
      .replace(entryScript, '')
      .replaceAll(/<link rel="modulepreload"[^>]*>/g, '')
      .replace(
        fontsLink,
        () => `<noscript>${fontsLink}</noscript><script type="module" ${names}>${afterPaint.text}</script>`,
      );
  };
  return {
    style,
    begin: (language) => begin.replace('<html lang="en">', `<html lang="${language}">`),
    goOn: (page, language, answers, firstView) => {
      const sources = [sentencesOf(language), ...(page === null ? [] : [page.source])];
      const files = [...new Set(sources.flatMap((source) => ahead.get(source) ?? []))];
      const [inDocument, asks] = firstView === '' ? [answers, []] : putOff(answers);
      const data = `<script type="application/json" id="${firstAnswersId}">${writeJson(inDocument)}</script>`;
      // Functions, because a replacement text would give `$` in a reply a meaning.
      return (firstView === '' ? withFiles(files) : withTop(files, asks)).replace(
        '<div id="root"></div>',
        () => `<div id="root">${firstView}</div>${data}`,
      );
    },
  };
}

const linkAhead = (address: string): string => `<link rel="modulepreload" crossorigin href="${address}" />`;

/** Who is signed in, whom the client starts for, and the addresses of everything else. */
function putOff(answers: FirstAnswers): [now: FirstAnswers, later: string[]] {
  const { [everyPageAsks.path]: me, ...others } = answers;
  return [{ [everyPageAsks.path]: me }, Object.keys(others)];
}

/** A page without its answer is not painted: the browser would lay it out twice. */
const awaitVerdict = `<link rel="expect" href="#${verdictId}" blocking="render" />`;

const linkedStyle = (name: string): RegExp =>
  new RegExp(`<link rel="stylesheet"[^>]*href="([^"]*/${name}-[^"]*)"[^>]*>`);

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
