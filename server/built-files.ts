import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';

/**
 * Reads what the files of the built client are called.
 * @param clientFolder of the build
 * @returns the address of what a source became; it throws for one that the build does not know
 */
export function readBuiltFiles(clientFolder: string): (source: string) => string {
  // First what is built for the copy: it has names of its own for what both builds know.
  const manifests = ['copy-manifest.json', 'manifest.json'].map(
    (name) =>
      JSON.parse(readFileSync(join(clientFolder, '.vite', name), 'utf8')) as Record<string, { file: string }>,
  );
  return (source) => {
    const built = manifests.map((manifest) => manifest[source]).find((found) => found !== undefined);
    if (built === undefined)
      throw new Error(`the build in ${clientFolder} does not say what ${source} became`);
    return `/${built.file}`;
  };
}

/** A style sheet or a script that stands in a page itself, with the hash by which the security policy lets it through. */
export type InlineFile = { text: string; hash: string };

/**
 * In the page itself a file costs no way to the server and back before anything is seen.
 * @throws Error for a text that would end the element it stands in
 */
export function readInlineFile(file: string): InlineFile {
  const text = readFileSync(file, 'utf8').trim();
  if (/<\/(style|script)/i.test(text)) throw new Error(`${file} cannot stand inside a page`);
  return { text, hash: `sha256-${createHash('sha256').update(text).digest('base64')}` };
}
