import { createInterface } from 'node:readline/promises';
import { parseArgs } from 'node:util';
import { CodedError } from '#shared/error-codes.ts';
import { createFirstAdministrator } from '#server/accounts/first-administrator.ts';
import { connectDatabase } from '#server/db.ts';

const usage =
  'npm run accounts:first -- --name "NAME" --email ADDRESS [--language en|fr]    the password is asked for';

/** `npm run accounts:first`: the first administrator of the database of DATABASE_URL, which has no demo accounts. */
async function main(): Promise<number> {
  const { values } = parseArgs({
    options: {
      name: { type: 'string' },
      email: { type: 'string' },
      language: { type: 'string', default: 'en' },
    },
  });
  const { name, email, language } = values;
  const url = process.env['DATABASE_URL'];
  if (url === undefined || name === undefined || email === undefined) {
    console.error(usage);
    return 1;
  }
  const password = await askPassword();
  const { db, close } = connectDatabase(url, (error) => console.error(error.message));
  try {
    await createFirstAdministrator(db, { name, email, password, language });
    console.log(`${email} can sign in as administrator.`);
    return 0;
  } catch (error) {
    if (!(error instanceof CodedError)) throw error;
    console.error(explain(error));
    return 1;
  } finally {
    await close();
  }
}

/** From the terminal or, in scripts, the first line of standard input: never from the command line, which others can read. */
async function askPassword(): Promise<string> {
  const lines = createInterface({ input: process.stdin, output: process.stderr });
  try {
    return await lines.question('First password, at least 12 signs: ');
  } finally {
    lines.close();
  }
}

function explain(error: CodedError): string {
  if (error.code === 'state-conflict')
    return 'There is an administrator already: accounts are made in the product.';
  if (error.code === 'email-taken') return 'This address has an account already.';
  return (error.issues ?? []).map(({ path, message }) => `${path}: ${message ?? ''}`).join('\n');
}

process.exitCode = await main();
