import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { CopyPageFiles, CopyPageStyle } from '#src/features/grower-copy/render-copy-page.ts';

/** Sources of what the page fetches: Vite serves them as they are in development, and builds them for production. */
const sources = {
  icon: 'src/gavelrow.svg',
  style: 'src/features/grower-copy/copy-page.css',
  script: 'src/features/grower-copy/start-copy-page.tsx',
  fonts: 'src/fonts.css',
};

/**
 * The page's style, and the addresses of what it fetches beside.
 * @param clientFolder the built client; null for the sources, which `npm run dev` serves
 * @throws when the build has no such file
 */
export function findCopyPageFiles(clientFolder: string | null): CopyPageFiles {
  const addressOf = clientFolder === null ? (source: string) => `/${source}` : readManifest(clientFolder);
  return {
    icon: addressOf(sources.icon),
    style: clientFolder === null ? { address: addressOf(sources.style) } : readStyle(clientFolder, addressOf),
    script: addressOf(sources.script),
    fonts: addressOf(sources.fonts),
  };
}

/** In the page itself the style costs no way to the server and back before anything is seen. */
function readStyle(clientFolder: string, addressOf: (source: string) => string): CopyPageStyle {
  const text = readFileSync(join(clientFolder, addressOf(sources.style)), 'utf8');
  return { text, hash: `sha256-${createHash('sha256').update(text).digest('base64')}` };
}

function readManifest(clientFolder: string): (source: string) => string {
  // The icon is the application's; the rest is built for the copy.
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
