import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { CopyPageFiles } from '#src/features/grower-copy/render-copy-page.ts';

/** Sources of what the page fetches: Vite serves them as they are in development, and builds them for production. */
const sources = {
  icon: 'src/gavelrow.svg',
  style: 'src/features/grower-copy/copy-page.css',
  script: 'src/features/grower-copy/start-copy-page.tsx',
  fonts: [400, 700].map(
    (weight) => `node_modules/@fontsource/noto-sans/files/noto-sans-latin-${weight}-normal.woff2`,
  ),
};

/**
 * Addresses of the page's style, script and fonts.
 * @param clientFolder the built client; null for the sources, which `npm run dev` serves
 * @throws when the build has no such file
 */
export function findCopyPageFiles(clientFolder: string | null): CopyPageFiles {
  const addressOf = clientFolder === null ? (source: string) => `/${source}` : readManifest(clientFolder);
  return {
    icon: addressOf(sources.icon),
    style: addressOf(sources.style),
    script: addressOf(sources.script),
    fonts: sources.fonts.map(addressOf),
  };
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
