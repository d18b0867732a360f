import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { CopyPageFiles } from '#src/features/grower-copy/render-copy-page.ts';

/** Sources of what the page fetches: Vite serves them as they are in development, and builds them for production. */
const sources = {
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
    style: addressOf(sources.style),
    script: addressOf(sources.script),
    fonts: sources.fonts.map(addressOf),
  };
}

function readManifest(clientFolder: string): (source: string) => string {
  const path = join(clientFolder, '.vite', 'copy-manifest.json');
  const manifest = JSON.parse(readFileSync(path, 'utf8')) as Record<string, { file: string } | undefined>;
  return (source) => {
    const built = manifest[source];
    if (built === undefined) throw new Error(`${path} does not say what ${source} became`);
    return `/${built.file}`;
  };
}
