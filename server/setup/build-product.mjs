import { createHash } from 'node:crypto';
import { mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join, relative } from 'node:path';
import { withProcessLock } from './process-lock.mjs';
import { runProgram } from './run-program.mjs';
import { SetupError } from './setup-error.mjs';

const clientSources = ['src', 'shared', 'locales', 'index.html', 'vite.config.ts', 'package-lock.json'];
const serverSources = ['server', 'shared', 'src', 'locales', 'drizzle/schema', 'package-lock.json'];

/**
 * Builds the client into dist/client where its sources changed since.
 * @param {string} projectRoot
 * @returns {Promise<boolean>} whether it was built
 */
export function buildClient(projectRoot) {
  return buildWhenChanged(projectRoot, 'client', clientSources, async () => {
    await runVite(projectRoot, 'production');
    // The page of a grower copy has a small script and style of its own; see vite.config.ts.
    await runVite(projectRoot, 'copy');
  });
}

async function runVite(projectRoot, mode) {
  const vite = ['node_modules/vite/bin/vite.js', 'build', '--mode', mode, '--logLevel', 'warn'];
  const env = { ...process.env, NODE_ENV: 'production' };
  const { code, output } = await runProgram(process.execPath, vite, {
    cwd: projectRoot,
    env,
    isEndable: true,
  });
  if (code !== 0) {
    throw new SetupError('The client could not be built.', 'npx tsc -b tells where its source is wrong.', {
      output,
    });
  }
}

/**
 * Bundles the server into dist/server where its sources changed since; its packages stay in node_modules.
 * @param {string} projectRoot
 * @returns {Promise<boolean>} whether it was built
 */
export function buildServer(projectRoot) {
  return buildWhenChanged(projectRoot, 'server', serverSources, async () => {
    const { build, stop } = await import('esbuild');
    try {
      await build({
        absWorkingDir: projectRoot,
        entryPoints: {
          main: 'server/main.ts',
          db: 'server/db.ts',
          'seed-demo': 'server/demo/seed-demo.ts',
          'computing-worker': 'server/computing/computing-worker.ts',
        },
        outdir: 'dist/server',
        bundle: true,
        splitting: true,
        packages: 'external',
        platform: 'node',
        format: 'esm',
        target: 'node20',
        // The page of a grower copy is rendered here, by the client's own components.
        jsx: 'automatic',
        plugins: [lightSentences(projectRoot)],
        sourcemap: true,
        logLevel: 'silent',
      });
    } catch (error) {
      throw new SetupError('The server could not be built.', 'npx tsc -b tells where its source is wrong.', {
        output: error.message,
      });
    } finally {
      await stop();
    }
  });
}

/**
 * Gives the client's components here the stand-in for the translation libraries that the script of the grower copy has,
 * as vite.config.ts does there: a page is rendered in half the time, and the script finds it as it would make it.
 */
function lightSentences(projectRoot) {
  const client = join(projectRoot, 'src');
  const stands = { i18next: 'light-i18next.ts', 'react-i18next': 'light-react-i18next.tsx' };
  return {
    name: 'light-sentences',
    setup: ({ onResolve }) =>
      onResolve({ filter: /^(react-)?i18next$/ }, ({ path, importer }) =>
        importer.startsWith(client)
          ? { path: join(client, 'features/grower-copy', stands[path]) }
          : undefined,
      ),
  };
}

/** Two starts at once build once: the second finds the first one's mark. */
function buildWhenChanged(projectRoot, name, sources, build) {
  const folder = join(projectRoot, 'dist', name);
  const mark = join(folder, '.built-from');
  return withProcessLock(join(projectRoot, '.local', `build-${name}.lock`), async () => {
    const now = hashSources(projectRoot, sources);
    if (readMark(mark) === now) return false;
    mkdirSync(folder, { recursive: true });
    writeFileSync(mark, '');
    await build();
    writeFileSync(mark, now);
    return true;
  });
}

function readMark(path) {
  try {
    return readFileSync(path, 'utf8');
  } catch {
    return '';
  }
}

/** By content, not by time: a checkout or a copy changes the times of files that are the same. */
function hashSources(projectRoot, sources) {
  const hash = createHash('sha256').update(process.version);
  for (const source of sources) {
    for (const path of listFiles(join(projectRoot, source))) {
      hash.update(`\0${relative(projectRoot, path)}\0`).update(readFileSync(path));
    }
  }
  return hash.digest('hex');
}

function listFiles(path) {
  try {
    return readdirSync(path, { withFileTypes: true })
      .sort((a, b) => (a.name < b.name ? -1 : 1))
      .flatMap((entry) => listFiles(join(path, entry.name)));
  } catch (error) {
    if (error.code === 'ENOTDIR') return [path];
    throw error;
  }
}
