import { join } from 'node:path';
import type { CopyPageFiles } from '#src/features/grower-copy/render-copy-page.ts';
import { readBuiltFiles, readInlineFile } from '#server/built-files.ts';

/** Sources of what the page fetches: Vite serves them as they are in development, and builds them for production. */
const sources = {
  icon: 'src/gavelrow.svg',
  style: 'src/features/grower-copy/copy-page.css',
  script: 'src/features/grower-copy/start-copy-page.tsx',
  fonts: 'src/fonts.css',
  afterPaint: 'src/start-after-paint.ts',
};

/**
 * The page's style and first script, and the addresses of what it fetches beside.
 * @param clientFolder the built client; null for the sources, which `npm run dev` serves
 * @throws when the build has no such file
 */
export function findCopyPageFiles(clientFolder: string | null): CopyPageFiles {
  if (clientFolder === null) {
    const addressOf = (source: string) => `/${source}`;
    return { ...nameFiles(addressOf), style: { address: addressOf(sources.style) }, afterPaint: null };
  }
  const addressOf = readBuiltFiles(clientFolder);
  const read = (source: string) => readInlineFile(join(clientFolder, addressOf(source)));
  return { ...nameFiles(addressOf), style: read(sources.style), afterPaint: read(sources.afterPaint) };
}

const nameFiles = (addressOf: (source: string) => string) => ({
  icon: addressOf(sources.icon),
  script: addressOf(sources.script),
  fonts: addressOf(sources.fonts),
});
