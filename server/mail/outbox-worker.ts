import type { Logger } from 'pino';
import type { Database } from '#server/db.ts';
import { copyMailContent } from './mail-content.ts';
import { explainSendingError, type FailedSending } from './mail-failure.ts';
import { messageIdOf, openMailSender, type MailSender, type MailSettings } from './mail-sender.ts';
import { claimDueMail, recordFailure, recordSent, type ClaimedMail } from './outbox-store.ts';
import { renderCopyMail } from './render-copy-mail.ts';

/** How often the outbox is looked at when nobody has said that something is in it, ms. */
const lookEvery = 15_000;

export type MailWorker = {
  /** Something was put into the outbox: look at once. */
  kick: () => void;
  /** Ends after the mail that is being sent. */
  close: () => Promise<void>;
};

/** Sends what the outbox holds, now and whenever something is due. Several servers may each run one. */
export function startMailWorker(db: Database, settings: MailSettings, logger: Logger): MailWorker {
  const sender = openMailSender(settings);
  let isClosing = false;
  let isWanted = false;
  let running: Promise<void> | null = null;
  const work = async () => {
    while (isWanted && !isClosing) {
      isWanted = false;
      try {
        await sendDueMails(db, sender, settings.from, () => isClosing);
      } catch (error) {
        // The database is away, say: the mail stays where it is and the next look finds it.
        logger.warn({ err: error }, 'the outbox could not be worked through');
      }
    }
    running = null;
  };
  const kick = () => {
    isWanted = true;
    if (!isClosing) running ??= work();
  };
  const timer = setInterval(kick, lookEvery);
  timer.unref();
  kick();
  return {
    kick,
    close: async () => {
      isClosing = true;
      clearInterval(timer);
      await running;
      sender.close();
    },
  };
}

/** Sends every mail that is due, one after the other. */
export async function sendDueMails(
  db: Database,
  sender: MailSender,
  from: string,
  isStopped: () => boolean = () => false,
): Promise<void> {
  while (!isStopped()) {
    const mail = await claimDueMail(db);
    if (mail === null) return;
    const failure = await deliverMail(sender, mail, from);
    // A stop between the server's yes and this line sends the mail again, under the same Message-ID.
    if (failure === null) await recordSent(db, mail);
    else await recordFailure(db, mail, failure);
  }
}

/** Hands one mail to the mail server. @returns null when it took it */
export async function deliverMail(
  sender: MailSender,
  mail: ClaimedMail,
  from: string,
): Promise<FailedSending | null> {
  try {
    const content = copyMailContent.parse(mail.content);
    if (content.link === null || !mail.isLinkOpen) return { reason: 'link-closed', words: '', isFinal: true };
    await sender.send({
      ...renderCopyMail(content, content.link, mail.language),
      messageId: messageIdOf(mail.id, from),
      to: mail.recipient,
      replyTo: content.advisorEmail,
      senderName: content.advisorName,
    });
    return null;
  } catch (error) {
    return explainSendingError(error);
  }
}
