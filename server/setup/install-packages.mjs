import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { withProcessLock } from './process-lock.mjs';
import { runProgram } from './run-program.mjs';
import { SetupError } from './setup-error.mjs';

/**
 * Installs the packages of package-lock.json where node_modules does not hold exactly those.
 * @param {string} projectRoot
 * @returns {Promise<boolean>} whether anything had to be installed
 */
export async function ensurePackages(projectRoot) {
  if (arePackagesCurrent(projectRoot)) return false;
  return withProcessLock(join(projectRoot, '.local', 'packages.lock'), async (addHolder) => {
    if (arePackagesCurrent(projectRoot)) return false;
    await installPackages(projectRoot, addHolder);
    return true;
  });
}

/**
 * Compares package-lock.json with the record that npm keeps of what it installed, which also holds after an install by
 * hand. Optional packages may be missing: they are for other systems.
 * @param {string} projectRoot
 */
export function arePackagesCurrent(projectRoot) {
  const wanted = readLock(join(projectRoot, 'package-lock.json'));
  const installed = readLock(join(projectRoot, 'node_modules', '.package-lock.json'));
  if (wanted === null || installed === null) return false;
  const isSame = (a, b) => a.version === b.version && a.integrity === b.integrity;
  const hasAll = Object.entries(wanted).every(([path, entry]) =>
    path in installed ? isSame(entry, installed[path]) : path === '' || entry.optional || entry.devOptional,
  );
  return hasAll && Object.keys(installed).every((path) => path in wanted);
}

function readLock(path) {
  try {
    return JSON.parse(readFileSync(path, 'utf8')).packages;
  } catch {
    return null;
  }
}

async function installPackages(projectRoot, onStart) {
  // With NODE_ENV=production npm would leave out what builds the client.
  const { NODE_ENV: _left, ...env } = process.env;
  const npm = process.env.npm_execpath;
  const [file, first] = npm === undefined ? ['npm', []] : [process.execPath, [npm]];
  const { code, output } = await runProgram(file, [...first, 'ci', '--include=dev'], {
    cwd: projectRoot,
    env,
    isEndable: true,
    onStart,
  });
  if (code === 0) return;
  throw new SetupError(
    'npm could not install the packages.',
    /ENOTFOUND|ECONNREFUSED|ETIMEDOUT|EAI_AGAIN|network/i.test(output)
      ? 'Check the network or proxy (npm ping) and run the command again.'
      : 'See the lines above; npm ci run by hand shows more.',
    { output },
  );
}
