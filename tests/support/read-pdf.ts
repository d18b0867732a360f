import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs';

/** A stretch of text on a page, in points from the left and the top edge. */
export type PlacedText = { text: string; left: number; right: number; top: number; bottom: number };
export type ReadPage = { width: number; height: number; texts: PlacedText[] };

/** One element of a document's structure, with what a reader is told of it. */
export type ReadElement = { role: string; alt?: string; children: ReadElement[] };

export type ReadPdf = {
  title: string;
  author: string;
  language: string;
  isTagged: boolean;
  pages: ReadPage[];
  /** All text in reading order, on one line. */
  words: string;
  /** Of every page, the elements at the top. */
  structure: ReadElement[];
  bookmarks: string[];
  links: string[];
  /** Names of the fonts, and how many of them are embedded. */
  fonts: { named: number; embedded: number };
};

/** Reads a PDF as a viewer and a screen reader would. */
export async function readPdf(bytes: Uint8Array): Promise<ReadPdf> {
  // The library takes the bytes for itself, so it gets its own.
  const document = await getDocument({ data: new Uint8Array(bytes), verbosity: 0 }).promise;
  const { info, markInfo } = { ...(await document.getMetadata()), markInfo: await document.getMarkInfo() };
  const facts = info as { Title?: string; Author?: string; Language?: string };
  const pages: ReadPage[] = [];
  const structure: ReadElement[] = [];
  const links: string[] = [];
  for (let number = 1; number <= document.numPages; number += 1) {
    const page = await document.getPage(number);
    pages.push(await readPage(page));
    const tree: unknown = await page.getStructTree();
    if (tree !== null) structure.push(readElement(tree as TreeNode));
    const annotations: { url?: string }[] = await page.getAnnotations();
    links.push(...annotations.flatMap(({ url }) => (url === undefined ? [] : [url])));
  }
  const outline = (await document.getOutline()) ?? [];
  const raw = Buffer.from(bytes).toString('latin1');
  await document.destroy();
  return {
    title: facts.Title ?? '',
    author: facts.Author ?? '',
    language: facts.Language ?? '',
    isTagged: markInfo?.Marked === true,
    pages,
    words: pages
      .map(({ texts }) => joinTexts(texts))
      .join(' ')
      .replace(/\s+/g, ' '),
    structure,
    bookmarks: outline.map(({ title }) => title),
    links,
    fonts: {
      named: raw.match(/\/Type \/FontDescriptor/g)?.length ?? 0,
      embedded: raw.match(/\/FontFile[23]? \d+ 0 R/g)?.length ?? 0,
    },
  };
}

/** A name in two scripts comes in two pieces: what begins where the last ended on its line belongs to it. */
function joinTexts(texts: readonly PlacedText[]): string {
  return texts
    .map(({ text, left, bottom }, i) => {
      const before = texts[i - 1];
      const goesOn =
        before && Math.abs(before.bottom - bottom) < tolerance && Math.abs(before.right - left) < tolerance;
      return goesOn ? text : ` ${text}`;
    })
    .join('');
}

type Page = Awaited<ReturnType<Awaited<ReturnType<typeof getDocument>['promise']>['getPage']>>;

async function readPage(page: Page): Promise<ReadPage> {
  const { width, height } = page.getViewport({ scale: 1 });
  const { items } = await page.getTextContent();
  const texts = items.flatMap((item): PlacedText[] => {
    if (!('str' in item) || item.str.trim() === '') return [];
    const [, , , size = 0, left = 0, baseline = 0] = item.transform as number[];
    const bottom = height - baseline;
    return [{ text: item.str, left, right: left + item.width, top: bottom - size, bottom }];
  });
  return { width, height, texts };
}

type TreeNode = { role?: string; alt?: string; children?: TreeNode[] };

function readElement({ role = '', alt, children = [] }: TreeNode): ReadElement {
  const elements = children.filter((child) => child.role !== undefined).map(readElement);
  return alt === undefined ? { role, children: elements } : { role, alt, children: elements };
}

/** Every element of a structure, its own children after it. */
export function listElements(elements: readonly ReadElement[]): ReadElement[] {
  return elements.flatMap((element) => [element, ...listElements(element.children)]);
}

/** Letters may touch by their descenders; points. */
const tolerance = 1;

/** Texts that lie on each other, or outside of the page's margins. */
export function findMisplaced({ width, height, texts }: ReadPage, margin: number): string[] {
  const outside = texts.filter(
    ({ left, right, top, bottom }) =>
      left < margin - tolerance ||
      right > width - margin + tolerance ||
      top < margin / 2 ||
      bottom > height - margin / 4,
  );
  const overlapping = texts.flatMap((one, i) =>
    texts
      .slice(i + 1)
      .filter(
        (other) =>
          Math.min(one.right, other.right) - Math.max(one.left, other.left) > tolerance &&
          Math.min(one.bottom, other.bottom) - Math.max(one.top, other.top) > tolerance,
      )
      .map((other) => `“${one.text}” lies on “${other.text}”`),
  );
  return [...outside.map(({ text }) => `“${text}” lies outside`), ...overlapping];
}
