import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { runProgram } from './run-program.mjs';
import { SetupError } from './setup-error.mjs';

/**
 * Installs packages of Debian (or a system made from it).
 * @param {string} what for the person: 'PostgreSQL', 'Chromium'
 * @param {readonly string[]} names
 * @throws SetupError with the one command to run where this process may not install
 */
export async function installFromDebian(what, names) {
  const command = `apt-get install -y --no-install-recommends ${names.join(' ')}`;
  if (!existsSync('/usr/bin/apt-get')) {
    throw new SetupError(
      `${what} was not found, and this system has no apt-get to install it with.`,
      `Install ${what} with this system's own package manager and run the command again.`,
    );
  }
  if (process.getuid?.() !== 0) {
    throw new SetupError(
      `${what} was not found, and only root may install it.`,
      `Run this once, then the command again:\n\n  sudo sh -c 'apt-get update && ${command}'\n`,
    );
  }
  const install = () => runApt(['install', '-y', '--no-install-recommends', ...names]);
  let result = await install();
  if (result.code !== 0) {
    await runApt(['update']);
    result = await install();
  }
  if (result.code !== 0) {
    throw new SetupError(
      `apt-get could not install ${what}.`,
      `See the lines above; when it works by hand, run the command again:\n\n  ${command}\n`,
      { output: result.output },
    );
  }
}

/** In a process group of its own: a Ctrl-C here must not leave packages half installed. */
function runApt(args) {
  return runProgram('apt-get', ['-o', 'DPkg::Lock::Timeout=300', ...args], {
    env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
    detached: true,
  });
}

const clusterSettings = '/etc/postgresql-common/createcluster.conf';

/** Installs Debian's PostgreSQL without the cluster that its package would make and start beside our own. */
export async function installPostgres() {
  if (process.getuid?.() !== 0 || !existsSync('/usr/bin/apt-get')) {
    await installFromDebian('PostgreSQL', ['postgresql']);
    return;
  }
  await installFromDebian('PostgreSQL', ['postgresql-common']);
  const before = readFileSync(clusterSettings, 'utf8');
  writeFileSync(clusterSettings, `${before}\ncreate_main_cluster = false\n`);
  try {
    await installFromDebian('PostgreSQL', ['postgresql']);
  } finally {
    // Whoever installs another version later gets what Debian does by itself.
    writeFileSync(clusterSettings, before);
  }
}
