import { accessSync, constants, readdirSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { runProgram } from './run-program.mjs';

export const oldestPostgres = 15;

/**
 * Finds the server programs of PostgreSQL: Debian keeps each version's in a folder of its own, others put them on PATH.
 * @param {number | null} [wanted] the version that made an existing data folder; null takes the newest
 * @returns {Promise<{ folder: string, version: number } | null>} null when no fitting version is installed
 */
export async function findPostgres(wanted = null) {
  const found = [];
  for (const folder of listCandidates()) {
    const version = await readVersion(folder);
    if (version !== null && version >= oldestPostgres) found.push({ folder, version });
  }
  const fitting = wanted === null ? found : found.filter(({ version }) => version === wanted);
  return fitting.sort((a, b) => b.version - a.version)[0] ?? null;
}

function listCandidates() {
  const fromDebian = listFolder('/usr/lib/postgresql').map((name) =>
    join('/usr/lib/postgresql', name, 'bin'),
  );
  const fromPath = (process.env.PATH ?? '').split(delimiter).filter((folder) => folder !== '');
  return [...new Set([...fromDebian, ...fromPath])].filter(
    (folder) => isExecutable(join(folder, 'initdb')) && isExecutable(join(folder, 'pg_ctl')),
  );
}

function listFolder(folder) {
  try {
    return readdirSync(folder);
  } catch {
    return [];
  }
}

function isExecutable(path) {
  try {
    accessSync(path, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

async function readVersion(folder) {
  const { code, output } = await runProgram(join(folder, 'postgres'), ['--version']);
  const version = /(\d+)/.exec(output)?.[1];
  return code === 0 && version !== undefined ? Number(version) : null;
}
