import { sql } from 'drizzle-orm';
import { check, index, integer, jsonb, pgTable, text, timestamp, uuid } from 'drizzle-orm/pg-core';
import { users } from './accounts.ts';
import { growerCopies } from './weigh-ups.ts';

/**
 * Mail to be sent: written in the transaction that decides to send it, sent by a worker that tries again.
 * The link's secret is in `content` until the mail is away, then taken out.
 */
export const outboxMails = pgTable(
  'outbox_mails',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    growerCopyId: uuid('grower_copy_id').references(() => growerCopies.id, { onDelete: 'cascade' }),
    recipient: text('recipient').notNull(),
    language: text('language', { enum: ['en', 'fr'] }).notNull(),
    content: jsonb('content').notNull(),
    state: text('state', { enum: ['waiting', 'sending', 'sent', 'failed'] })
      .notNull()
      .default('waiting'),
    attempts: integer('attempts').notNull().default(0),
    nextAttemptAt: timestamp('next_attempt_at', { withTimezone: true }).notNull().defaultNow(),
    lastError: text('last_error'),
    createdBy: uuid('created_by').references(() => users.id),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
    sentAt: timestamp('sent_at', { withTimezone: true }),
  },
  (table) => [
    index('outbox_mails_due_idx').on(table.state, table.nextAttemptAt),
    check('outbox_mails_state', sql`${table.state} in ('waiting', 'sending', 'sent', 'failed')`),
    check('outbox_mails_language', sql`${table.language} in ('en', 'fr')`),
  ],
);
