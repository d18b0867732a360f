import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { projectRoot } from './ground.mjs';

/** Beside the database, so that whoever deletes the one deletes the other. */
const path = join(projectRoot, '.local', 'postgres', 'demo.json');

/**
 * What a visitor needs to look round the demo. It is kept because the database has only the hash of a grower's link.
 * @typedef {{ accounts: { role: string, email: string, password: string }[], growerPath: string | null }} DemoNotes
 */

/** @param {DemoNotes} notes */
export function writeDemoNotes({ accounts, growerPath }) {
  writeFileSync(path, JSON.stringify({ accounts, growerPath }, null, 2), { mode: 0o600 });
}

/** @returns {DemoNotes | null} null when this project's own database has not been filled yet */
export function readDemoNotes() {
  try {
    return JSON.parse(readFileSync(path, 'utf8'));
  } catch {
    return null;
  }
}

/**
 * @param {DemoNotes} notes
 * @param {string} url where the client is served
 */
export function printDemoNotes({ accounts, growerPath }, url) {
  if (accounts.length === 0) return;
  const widthOf = (field) => Math.max(...accounts.map((account) => account[field].length));
  const [role, email] = [widthOf('role'), widthOf('email')];
  console.log('\nAccounts of the demo (role, e-mail, password):');
  for (const account of accounts) {
    console.log(`  ${account.role.padEnd(role)}  ${account.email.padEnd(email)}  ${account.password}`);
  }
  if (growerPath !== null) {
    console.log(
      `\nA grower's copy from the demo, which needs no account:\n  ${new URL(growerPath, url).href}`,
    );
  }
}

/** @param {string | null} url where caught mail is shown; null where none is caught */
export function printMailPage(url) {
  if (url !== null) console.log(`\nMail that the demo sends goes nowhere else and is shown here:\n  ${url}`);
}
