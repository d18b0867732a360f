import { SMTPServer } from 'smtp-server';
import { readMail } from './read-mail.mjs';

/** Mails kept; the oldest go first. */
const kept = 200;

/**
 * A mail server for development and tests: it listens on loopback alone, keeps what it is given and sends nothing on.
 * Addresses that begin with `refused@` are refused, so that this can be seen too.
 * @param {number} port 0 for a free one
 * @returns {Promise<{ url: string, port: number, mails: () => readonly (import('./read-mail.mjs').ReadMail & { recipients: string[], at: Date })[], close: () => Promise<void> }>}
 */
export async function openMailSink(port = 0) {
  const mails = [];
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    logger: false,
    onRcptTo: ({ address }, _session, answer) => {
      if (!address.startsWith('refused@')) return answer();
      return answer(Object.assign(new Error('No such mailbox here'), { responseCode: 550 }));
    },
    onData: (stream, { envelope }, answer) => {
      const chunks = [];
      stream.on('data', (chunk) => chunks.push(chunk));
      stream.on('end', () => {
        const recipients = envelope.rcptTo.map(({ address }) => address);
        mails.push({ ...readMail(Buffer.concat(chunks).toString('utf8')), recipients, at: new Date() });
        if (mails.length > kept) mails.shift();
        answer();
      });
    },
  });
  // A client that breaks off is no failure of the sink.
  server.on('error', () => undefined);
  await new Promise((resolve, reject) => {
    server.server.once('error', reject);
    server.listen(port, '127.0.0.1', resolve);
  });
  const listening = server.server.address().port;
  return {
    url: `smtp://127.0.0.1:${listening}`,
    port: listening,
    mails: () => mails,
    close: () => new Promise((resolve) => server.close(() => resolve())),
  };
}
