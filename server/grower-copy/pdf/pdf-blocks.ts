import type { PageFlow } from './page-flow.ts';
import { breakLines, drawLines, inks, styles, type Piece, type TextStyle } from './pdf-text.ts';

/** Under a heading at least this much of what it heads stays on the page, points. */
const keptBelow = 42;

const headings = {
  H1: { style: styles.title, above: 0, below: 4 },
  H2: { style: styles.heading, above: 8, below: 2 },
  H3: { style: styles.subheading, above: 4, below: 1 },
} as const;

/** A heading, never alone at the foot of a page. */
export function addHeading(
  flow: PageFlow,
  level: keyof typeof headings,
  text: string,
  width = flow.width,
): void {
  const { style, above, below } = headings[level];
  const lines = breakLines(flow.doc, text, style, width);
  if (!flow.ensureRoom(above + lines.length * style.leading + keptBelow) && !flow.isAtTop) flow.y += above;
  flow.leaf(level, () => flow.writeLines(lines, style));
  flow.y += below;
}

/** A paragraph; `after` is the space below it, points. */
export function addParagraph(
  flow: PageFlow,
  text: string | readonly Piece[],
  style: TextStyle = styles.body,
  { after = 3, width = flow.width }: { after?: number; width?: number } = {},
): void {
  const lines = breakLines(flow.doc, text, style, width);
  // Two lines at least stay together at a break.
  flow.ensureRoom(Math.min(lines.length, 2) * style.leading);
  flow.leaf('P', () => flow.writeLines(lines, style));
  flow.y += after;
}

/** Room for the mark in front of an item, points. */
const indent = 11;

/** A list; each item begins with the same bullet. */
export function addBullets(flow: PageFlow, items: readonly string[], style: TextStyle = styles.body): void {
  flow.group('L', () => {
    for (const item of items) {
      const lines = breakLines(flow.doc, item, style, flow.width - indent);
      flow.ensureRoom(Math.min(lines.length, 2) * style.leading);
      flow.group('LI', () => {
        flow.leaf('Lbl', () => {
          const bullet = breakLines(flow.doc, '•', style, indent);
          drawLines(flow.doc, bullet, { x: flow.left, y: flow.y, width: indent }, style);
        });
        flow.leaf('LBody', () =>
          flow.writeLines(lines, style, { x: flow.left + indent, width: flow.width - indent }),
        );
      });
    }
  });
  flow.y += 3;
}

/** A thin line over the whole width. */
export function addRule(flow: PageFlow, { colour = inks.rule, weight = 0.75 } = {}): void {
  flow.artifact(() => {
    flow.doc
      .moveTo(flow.left, flow.y)
      .lineTo(flow.right, flow.y)
      .lineWidth(weight)
      .strokeColor(colour)
      .stroke();
  });
}

/** A sentence that ends in a link; the link goes onto a line of its own where it does not fit behind the words. */
export function addLink(
  flow: PageFlow,
  text: readonly Piece[],
  { words, target }: { words: string; target: string },
  style: TextStyle,
): void {
  const linkStyle = { ...style, colour: inks.action };
  const lead = breakLines(flow.doc, text, style, flow.width);
  const leadWidth = (lead.at(-1)?.width ?? 0) + style.size / 3;
  const whole = breakLines(flow.doc, words, linkStyle, flow.width);
  const isBehind = whole.length === 1 && leadWidth + (whole[0]?.width ?? 0) <= flow.width;
  flow.ensureRoom((lead.length + whole.length) * style.leading);
  flow.group('P', () => {
    flow.leaf('Span', () => flow.writeLines(lead, style));
    if (isBehind) flow.y -= style.leading;
    const x = flow.left + (isBehind ? leadWidth : 0);
    flow.leaf('Link', (element) => {
      for (const line of whole) {
        const top = flow.y;
        flow.writeLines([line], linkStyle, { x, width: flow.right - x });
        flow.doc.link(x, top, line.width, style.leading, target, {
          structParent: element,
          // A plain string would be written as a name.
          Contents: new String(words) as string,
        });
      }
    });
  });
  flow.y += 3;
}
