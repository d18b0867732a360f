import { mailFailure, type MailFailure } from '#shared/grower-copy.ts';

export type FailedSending = {
  reason: MailFailure;
  /** The mail server's own words, cut short; empty where it said nothing. */
  words: string;
  /** Trying again would meet the same answer. */
  isFinal: boolean;
};

/** Longest answer of a mail server that is kept. */
const longestWords = 300;

/**
 * Says why a mail was not taken. A permanent answer (5xx of RFC 5321) about this mail or its recipient is final;
 * everything that an administrator or time can mend (no connection, sign-in refused, 4xx) is tried again.
 */
export function explainSendingError(error: unknown): FailedSending {
  const code = readField(error, 'code');
  const status = readField(error, 'responseCode');
  const isPermanent = typeof status === 'number' && status >= 500;
  const response = readField(error, 'response');
  const words = (typeof response === 'string' ? response : '').replace(/\s+/g, ' ').slice(0, longestWords);
  if (code === 'EAUTH' || code === 'ENOAUTH') return { reason: 'sign-in-refused', words, isFinal: false };
  if (isPermanent) {
    const isAboutRecipient = readField(error, 'command') === 'RCPT TO';
    return { reason: isAboutRecipient ? 'recipient-refused' : 'mail-refused', words, isFinal: true };
  }
  if (typeof status === 'number') return { reason: 'put-off', words, isFinal: false };
  return { reason: 'server-away', words, isFinal: false };
}

function readField(error: unknown, name: string): unknown {
  return typeof error === 'object' && error !== null
    ? Object.getOwnPropertyDescriptor(error, name)?.value
    : undefined;
}

/** A failure as the outbox keeps it: the code of the reason, then the server's words. */
export const writeFailure = ({ reason, words }: Pick<FailedSending, 'reason' | 'words'>): string =>
  words === '' ? reason : `${reason} ${words}`;

/** Reads what `writeFailure` wrote. */
export function readFailure(text: string | null): { reason: MailFailure | null; words: string } {
  const [code = '', ...words] = (text ?? '').split(' ');
  const reason = mailFailure.safeParse(code);
  return { reason: reason.success ? reason.data : null, words: words.join(' ') };
}
