import { drawLines, type Alignment, type Line, type TextStyle } from './pdf-text.ts';

/** Sizes of a sheet. */
export const papers = ['a4', 'letter'] as const;
export type Paper = (typeof papers)[number];
/** In points. */
const sheets: Record<Paper, { width: number; height: number }> = {
  a4: { width: 595.28, height: 841.89 },
  letter: { width: 612, height: 792 },
};
/** What is left free around the text, points. */
export const margins = { side: 40, top: 30, bottom: 44 };

/** A part of the document's structure: what a screen reader is told that the content is. */
type ElementType =
  | 'Document'
  | 'Sect'
  | 'H1'
  | 'H2'
  | 'H3'
  | 'P'
  | 'L'
  | 'LI'
  | 'Lbl'
  | 'LBody'
  | 'Table'
  | 'THead'
  | 'TBody'
  | 'TR'
  | 'TH'
  | 'TD'
  | 'Span'
  | 'Figure'
  | 'Link';

type ElementOptions = PDFKit.Mixins.StructureElementOptions;

/**
 * Lays a document out from top to bottom over as many pages as it takes, and writes its structure beside it: everything
 * drawn is either content of an element or an artifact.
 */
export class PageFlow {
  readonly doc: PDFKit.PDFDocument;
  readonly left = margins.side;
  readonly width: number;
  readonly bottom: number;
  /** Where the next thing goes, from the top edge of the page. */
  y = margins.top;
  readonly #sheet: { width: number; height: number };
  readonly #parents: PDFKit.PDFStructureElement[];
  /** The leaf that is being drawn: it goes on behind a page break. */
  #leaf: { element: PDFKit.PDFStructureElement; type: ElementType } | null = null;

  constructor(doc: PDFKit.PDFDocument, paper: Paper) {
    this.doc = doc;
    this.#sheet = sheets[paper];
    this.width = this.#sheet.width - 2 * margins.side;
    this.bottom = this.#sheet.height - margins.bottom;
    const root = doc.struct('Document');
    doc.addStructure(root);
    this.#parents = [root];
    this.#addSheet();
  }

  get right(): number {
    return this.left + this.width;
  }

  /** Nothing stands on the page yet. */
  get isAtTop(): boolean {
    return this.y === margins.top;
  }

  #addSheet(): void {
    const { width, height } = this.#sheet;
    this.doc.addPage({ size: [width, height], margin: 0 });
    // A reader that goes from link to link follows the structure.
    Object.assign(this.doc.page.dictionary.data, { Tabs: 'S' });
    this.y = margins.top;
  }

  /** Begins a new page; a leaf that is being drawn goes on there. */
  newPage(): void {
    if (this.#leaf) this.doc.endMarkedContent();
    this.#addSheet();
    if (this.#leaf) this.#markLeaf(this.#leaf);
  }

  /** Turns the page where less than this height is left. Tells whether it did. */
  ensureRoom(height: number): boolean {
    if (this.y + height <= this.bottom || this.isAtTop) return false;
    this.newPage();
    return true;
  }

  /** An element that holds others. */
  group(type: ElementType, fill: () => void, options: ElementOptions = {}): void {
    const element = this.#addElement(type, options);
    this.#parents.push(element);
    fill();
    this.#parents.pop();
  }

  /** An element that holds what is drawn. */
  leaf(
    type: ElementType,
    draw: (element: PDFKit.PDFStructureElement) => void,
    options: ElementOptions = {},
  ): void {
    const element = this.#addElement(type, options);
    this.#leaf = { element, type };
    this.#markLeaf(this.#leaf);
    draw(element);
    this.doc.endMarkedContent();
    this.#leaf = null;
  }

  /** What is drawn for the eye alone: rules, and what is repeated on each page. */
  artifact(draw: () => void, type: 'Layout' | 'Pagination' = 'Layout'): void {
    this.doc.markContent('Artifact', { type });
    draw();
    this.doc.endMarkedContent();
  }

  #addElement(type: ElementType, options: ElementOptions): PDFKit.PDFStructureElement {
    const element = this.doc.struct(type, options);
    this.#parents.at(-1)?.add(element);
    return element;
  }

  #markLeaf({ element, type }: { element: PDFKit.PDFStructureElement; type: ElementType }): void {
    element.add(this.doc.markStructureContent(type));
  }

  /** Lines of the leaf that is being drawn, over as many pages as they take. */
  writeLines(
    lines: readonly Line[],
    style: TextStyle,
    box: { x?: number; width?: number; align?: Alignment } = {},
  ): void {
    for (const line of lines) {
      this.ensureRoom(style.leading);
      const { x = this.left, width = this.width, align = 'start' } = box;
      drawLines(this.doc, [line], { x, y: this.y, width, align }, style);
      this.y += style.leading;
    }
  }
}
