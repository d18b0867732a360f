import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { create } from 'fontkit';
import { unpackWoff } from './unpack-woff.ts';

/** Normal text and what stands out in it. */
export type Weight = 'normal' | 'bold';

const weightNumbers: Record<Weight, number> = { normal: 400, bold: 700 };

/** Parts of Noto Sans in the order in which a character is looked for: names may come from anywhere. */
const scripts = ['latin', 'latin-ext', 'vietnamese', 'greek', 'cyrillic', 'cyrillic-ext'] as const;

/** One file of the typeface; a document embeds of it only the glyphs that it uses. */
export type Face = {
  /** Under which a document knows it. */
  name: string;
  bytes: Buffer;
  characters: ReadonlySet<number>;
};

/** What stands for a character that no part of the typeface has. */
const replacement = '\ufffd';

const { resolve } = createRequire(import.meta.url);
const loaded = new Map<string, Face>();

function loadFace(script: string, weight: Weight): Face {
  const name = `noto-sans-${script}-${weightNumbers[weight]}-normal`;
  const known = loaded.get(name);
  if (known) return known;
  const bytes = unpackWoff(readFileSync(resolve(`@fontsource/noto-sans/files/${name}.woff`)));
  const font = create(bytes);
  if (!('characterSet' in font)) throw new Error(`${name} is a collection, not a font`);
  const face = { name, bytes, characters: new Set(font.characterSet) };
  loaded.set(name, face);
  return face;
}

function findFace(codePoint: number, weight: Weight): Face | null {
  for (const script of scripts) {
    const face = loadFace(script, weight);
    if (face.characters.has(codePoint)) return face;
  }
  return null;
}

/** Cuts text where another file of the typeface has to take over. */
export function splitByFace(text: string, weight: Weight): { text: string; face: Face }[] {
  const parts: { text: string; face: Face }[] = [];
  for (const character of text) {
    const found = findFace(character.codePointAt(0) ?? 0, weight);
    const face = found ?? loadFace('latin', weight);
    const drawn = found ? character : replacement;
    const last = parts.at(-1);
    if (last?.face === face) last.text += drawn;
    else parts.push({ text: drawn, face });
  }
  return parts;
}

/** Has a document write in a face from here on; it is embedded once, whatever it is asked for. */
export function setFace(doc: PDFKit.PDFDocument, face: Face, size: number): PDFKit.PDFDocument {
  return doc.registerFont(face.name, face.bytes).font(face.name).fontSize(size);
}
