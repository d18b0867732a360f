import { spawnSync } from 'node:child_process';
import { readFileSync, statSync } from 'node:fs';
import { SetupError } from './setup-error.mjs';

/**
 * PostgreSQL refuses to run as root; then it runs as the account of Debian's package.
 * @typedef {{ name: string, uid: number, gid: number, capability: string | null }} Account
 */

/**
 * The account that PostgreSQL's programs run under for data kept in a folder; null: this process's own.
 * @param {string} folder an existing folder that the data is or will be in
 * @returns {Account | null}
 */
export function choosePostgresAccount(folder) {
  if (process.getuid?.() !== 0) return null;
  const account = readAccount((fields) => fields[0] === 'postgres');
  if (account === null) {
    throw new SetupError(
      'PostgreSQL cannot run as root, and this system has no account named postgres.',
      'Create one (useradd --system postgres) or run the command as a plain user.',
    );
  }
  return { ...account, capability: canEnter(folder, account) ? null : chooseCapability(folder, account) };
}

/** The account that owns a folder, where it is not root and has a name in this system. */
export function readOwner(folder) {
  const { uid } = statSync(folder);
  return uid === 0 ? null : readAccount((fields) => Number(fields[2]) === uid);
}

/** @param {(fields: string[]) => boolean} isWanted fields of a line of /etc/passwd */
function readAccount(isWanted) {
  const fields = readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .map((line) => line.split(':'))
    .find((line) => line.length >= 6 && isWanted(line));
  if (fields === undefined) return null;
  return { name: fields[0], uid: Number(fields[2]), gid: Number(fields[3]), home: fields[5] };
}

function canEnter(folder, { uid, gid }) {
  return spawnSync('ls', ['-d', `${folder}/.`], { uid, gid, cwd: '/', stdio: 'ignore' }).status === 0;
}

/** Where a closed folder lies above the data (/root, say), the programs may be given the right to pass through it. */
function chooseCapability(folder, account) {
  for (const capability of ['dac_read_search', 'dac_override']) {
    const [file, args] = withCapability(account, capability, 'ls', ['-d', `${folder}/.`]);
    if (spawnSync(file, args, { cwd: '/', stdio: 'ignore' }).status === 0) return capability;
  }
  throw new SetupError(
    `The account postgres, which runs the database, cannot enter ${folder}.`,
    'Move the project to a folder that everybody may enter (such as /srv), or run the command as a plain user.',
  );
}

function withCapability({ uid, gid }, capability, file, args) {
  const caps = ['--inh-caps', `+${capability}`, '--ambient-caps', `+${capability}`];
  return ['setpriv', [`--reuid=${uid}`, `--regid=${gid}`, '--clear-groups', ...caps, file, ...args]];
}

/**
 * What to hand to a spawn so that a program runs under an account, with nothing of our environment.
 * @param {Account | null} account
 * @param {string} file
 * @param {readonly string[]} args
 * @returns {[string, readonly string[], { cwd: string, env: NodeJS.ProcessEnv, uid?: number, gid?: number }]}
 */
export function buildCommandAs(account, file, args) {
  const options = { cwd: '/', env: { PATH: process.env.PATH, LC_ALL: 'C.UTF-8', TZ: 'UTC' } };
  if (account === null) return [file, args, options];
  if (account.capability !== null)
    return [...withCapability(account, account.capability, file, args), options];
  return [file, args, { ...options, uid: account.uid, gid: account.gid }];
}
