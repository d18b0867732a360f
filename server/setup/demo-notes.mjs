import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { projectRoot } from './ground.mjs';

const path = join(projectRoot, '.local', 'demo.json');

/**
 * What a visitor needs to look round the demo; kept because only the hash of a link is in the database.
 * @typedef {{ accounts: { role: string, email: string, password: string }[], growerLink: string }} DemoNotes
 */

/** @param {DemoNotes} notes */
export function writeDemoNotes(notes) {
  writeFileSync(path, JSON.stringify(notes, null, 2), { mode: 0o600 });
}

/** @returns {DemoNotes | null} null when this project's database holds no demo */
export function readDemoNotes() {
  try {
    return JSON.parse(readFileSync(path, 'utf8'));
  } catch {
    return null;
  }
}

/**
 * @param {DemoNotes} notes
 * @param {string} url of the running server
 */
export function printDemoNotes({ accounts, growerLink }, url) {
  const widthOf = (field) => Math.max(...accounts.map((account) => account[field].length));
  const [role, email] = [widthOf('role'), widthOf('email')];
  console.log('\nAccounts of the demo (role, e-mail, password):');
  for (const account of accounts) {
    console.log(`  ${account.role.padEnd(role)}  ${account.email.padEnd(email)}  ${account.password}`);
  }
  console.log(`\nA grower's copy of the demo, without an account:\n  ${url}${growerLink}`);
}
