import { setFace, splitByFace, type Face, type Weight } from './pdf-fonts.ts';

/** Colours of the page (src/styles.css), on white paper; each is told from white in grey as well. */
export const inks = {
  ink: '#22261f',
  faded: '#5d5f55',
  rule: '#d8d0bb',
  edge: '#8a8470',
  paper: '#ffffff',
  action: '#1d4e6b',
  ahead: '#0f655c',
  behind: '#a84a14',
  level: '#475a8a',
  open: '#6a6357',
  breakEven: '#8a5a00',
  stop: '#9b2c1d',
} as const;

/** How text is set; lengths in points. */
export type TextStyle = { size: number; leading: number; weight: Weight; colour: string };

export const styles = {
  title: { size: 16.5, leading: 21, weight: 'bold', colour: inks.ink },
  lead: { size: 10.5, leading: 14, weight: 'normal', colour: inks.ink },
  heading: { size: 12, leading: 16, weight: 'bold', colour: inks.ink },
  subheading: { size: 9.6, leading: 13, weight: 'bold', colour: inks.ink },
  body: { size: 8.8, leading: 11.4, weight: 'normal', colour: inks.ink },
  strong: { size: 8.8, leading: 11.4, weight: 'bold', colour: inks.ink },
  small: { size: 8.4, leading: 10.6, weight: 'normal', colour: inks.faded },
  label: { size: 8, leading: 9.6, weight: 'normal', colour: inks.faded },
} as const satisfies Record<string, TextStyle>;

/** A stretch of text inside a paragraph that is set otherwise. */
export type Piece = { text: string; weight?: Weight; colour?: string };

type Run = { text: string; face: Face; colour: string; width: number };

/** One line as it will be drawn; `width` without the space at its end. */
export type Line = { runs: Run[]; width: number };

/**
 * Text as the typeface can draw it. Noto Sans has no narrow no-break space and no no-break hyphen: a thin space and a
 * hyphen stand for them, which `breakLines` does not break at either.
 */
function prepareText(text: string): string {
  return text
    .normalize('NFC')
    .replace(/\u202f/g, '\u2009')
    .replace(/\s*[\r\n\t]+\s*/g, ' ')
    .replace(/[\p{Cc}\p{Cf}]/gu, '');
}

/** Stands for a hyphen at which no line may end, until the lines are made. */
const boundHyphen = '\u2011';

/** Width of a text in one face, in points. */
function measure(doc: PDFKit.PDFDocument, text: string, face: Face, size: number): number {
  return setFace(doc, face, size).widthOfString(text);
}

/** Words with the space or hyphen that ends them: between two of these a line may end. */
function cutWords(text: string): string[] {
  return text.match(/[^ -]*-*[ ]*/g)?.filter((word) => word !== '') ?? [];
}

function toRuns(
  doc: PDFKit.PDFDocument,
  text: string,
  piece: { weight: Weight; colour: string },
  size: number,
): Run[] {
  return splitByFace(text.replaceAll(boundHyphen, '-'), piece.weight).map((part) => ({
    ...part,
    colour: piece.colour,
    width: measure(doc, part.text, part.face, size),
  }));
}

const widthOf = (runs: readonly Run[]): number => runs.reduce((sum, run) => sum + run.width, 0);

/** Adds a run to a line, joined to the last one where only the words differ. */
function addRun(line: Line, run: Run): void {
  const last = line.runs.at(-1);
  if (last && last.face === run.face && last.colour === run.colour) {
    last.text += run.text;
    last.width += run.width;
  } else {
    line.runs.push({ ...run });
  }
}

/**
 * Sets text into lines, breaking at spaces and behind hyphens; a word longer than a line is cut where it must.
 * @param text plain, or in pieces that are set otherwise than the rest
 * @param width of the longest line, points
 */
export function breakLines(
  doc: PDFKit.PDFDocument,
  text: string | readonly Piece[],
  style: TextStyle,
  width: number,
): Line[] {
  const pieces = typeof text === 'string' ? [{ text }] : text;
  const lines: Line[] = [{ runs: [], width: 0 }];
  let used = 0;
  const place = (word: string, set: { weight: Weight; colour: string }): void => {
    const bare = widthOf(toRuns(doc, word.replace(/ +$/, ''), set, style.size));
    if (used > 0 && used + bare > width) {
      lines.push({ runs: [], width: 0 });
      used = 0;
    }
    const line = lines.at(-1);
    if (line === undefined) return;
    if (bare > width && word.length > 1) {
      const fits = longestStart(doc, word, set, style.size, width);
      place(word.slice(0, fits), set);
      place(word.slice(fits), set);
      return;
    }
    const runs = toRuns(doc, word, set, style.size);
    for (const run of runs) addRun(line, run);
    line.width = used + bare;
    used += widthOf(runs);
  };
  for (const piece of pieces) {
    const set = { weight: piece.weight ?? style.weight, colour: piece.colour ?? style.colour };
    for (const word of cutWords(prepareText(piece.text))) place(word, set);
  }
  return lines;
}

/** How many of a word's characters fit on a line, at least one. */
function longestStart(
  doc: PDFKit.PDFDocument,
  word: string,
  set: { weight: Weight; colour: string },
  size: number,
  width: number,
): number {
  let count = 1;
  while (count + 1 < word.length && widthOf(toRuns(doc, word.slice(0, count + 1), set, size)) <= width) {
    count += 1;
  }
  return count;
}

export type Alignment = 'start' | 'middle' | 'end';

/**
 * Draws lines from a top edge downwards; nothing is broken or paged here.
 * @param x left edge of a box of `width` points
 */
export function drawLines(
  doc: PDFKit.PDFDocument,
  lines: readonly Line[],
  box: { x: number; y: number; width: number; align?: Alignment },
  style: TextStyle,
): void {
  const shares: Record<Alignment, number> = { start: 0, middle: 0.5, end: 1 };
  const share = shares[box.align ?? 'start'];
  lines.forEach((line, index) => {
    let x = box.x + (box.width - line.width) * share;
    const y = box.y + index * style.leading + (style.leading - style.size * 1.36) / 2;
    for (const run of line.runs) {
      setFace(doc, run.face, style.size).fillColor(run.colour).text(run.text, x, y, { lineBreak: false });
      x += run.width;
    }
  });
}
