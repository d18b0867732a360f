import { fileURLToPath } from 'node:url';
import { installPostgres } from './install-debian.mjs';
import { ensurePackages } from './install-packages.mjs';
import { readOwner } from './postgres-account.mjs';
import { findPostgres, oldestPostgres } from './postgres-programs.mjs';
import { runStep } from './progress.mjs';
import { SetupError } from './setup-error.mjs';

export const projectRoot = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

/** @throws SetupError when this Node is older than the packages need */
export function requireNode() {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
  if (major > 20 || (major === 20 && minor >= 19)) return;
  throw new SetupError(
    `This is Node ${process.versions.node}; Gavelrow needs 20.19 or newer.`,
    'Install it from your system or nodejs.org and run the command again.',
  );
}

/** Finds PostgreSQL, or installs it where this process may. */
export function preparePostgres() {
  return runStep('PostgreSQL', async (tell) => {
    const found = await findPostgres();
    if (found !== null) {
      tell(`version ${found.version} in ${found.folder}`);
      return;
    }
    await installPostgres();
    const installed = await findPostgres();
    if (installed === null) {
      throw new SetupError(
        `This system's PostgreSQL is older than ${oldestPostgres}.`,
        `Install PostgreSQL ${oldestPostgres} or newer (apt.postgresql.org has it) and run the command again.`,
      );
    }
    tell(`version ${installed.version} installed`);
  });
}

/**
 * Root is needed only to install packages of the system. All else is done as whoever owns the project's folder,
 * so that this person finds no file of root's in it later.
 */
export function becomeProjectOwner() {
  if (process.getuid?.() !== 0) return;
  const owner = readOwner(projectRoot);
  if (owner === null) return;
  process.initgroups(owner.name, owner.gid);
  process.setgid(owner.gid);
  process.setuid(owner.uid);
  Object.assign(process.env, { HOME: owner.home, USER: owner.name, LOGNAME: owner.name });
  console.log(`  Going on as ${owner.name}, who owns ${projectRoot}`);
}

/** Installs the packages of npm where they are missing or stale. */
export function preparePackages() {
  return runStep('Packages', async (tell) => {
    tell((await ensurePackages(projectRoot)) ? 'installed' : 'up to date');
  });
}
