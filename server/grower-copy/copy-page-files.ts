import { join } from 'node:path';
import type { CopyPageFiles } from '#src/features/grower-copy/render-copy-page.ts';
import { readBuiltFiles, readInlineStyle } from '#server/built-files.ts';

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
  const addressOf = clientFolder === null ? (source: string) => `/${source}` : readBuiltFiles(clientFolder);
  return {
    icon: addressOf(sources.icon),
    style:
      clientFolder === null
        ? { address: addressOf(sources.style) }
        : readInlineStyle(join(clientFolder, addressOf(sources.style))),
    script: addressOf(sources.script),
    fonts: addressOf(sources.fonts),
  };
}
