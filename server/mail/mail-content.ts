import { z } from 'zod';
import { bilingualName } from '#shared/catalogue.ts';

/** What a mail that brings a grower copy says, as the outbox keeps it until the mail is written. */
export const copyMailContent = z.object({
  growerName: z.string(),
  farmName: z.string(),
  cropName: bilingualName,
  advisorName: z.string(),
  advisorEmail: z.string(),
  advisorPhone: z.string().nullable().default(null),
  expiresAt: z.iso.datetime(),
  /** Whose days the letter is told in, as the copy is (IANA). */
  timeZone: z.string().default('UTC'),
  /** The whole address with its secret; null once the mail is sent or given up. */
  link: z.url().nullable(),
});
export type CopyMailContent = z.infer<typeof copyMailContent>;
