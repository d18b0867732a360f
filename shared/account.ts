import { z } from 'zod';
import { defineContract } from './contract.ts';
import { languages } from './language.ts';

export const roles = ['advisor', 'agronomist', 'administrator'] as const;
export const role = z.enum(roles);
export type Role = z.infer<typeof role>;

export const language = z.enum(languages);
export type Language = z.infer<typeof language>;

export const accountStatus = z.enum(['active', 'suspended']);

const email = z.email().max(254);
/** As people write it, with what separates its digits: it is dialled, not reckoned with. */
export const phoneNumber = z
  .string()
  .trim()
  .max(30)
  .regex(/^\+?(?:[ ().-]*\d){5,20}[ ().-]*$/);
/** Long enough to resist guessing, short enough that hashing it costs what it should. */
const newPassword = z.string().min(12).max(200);

/** The signed-in person, as the client needs it. */
export const me = z.object({
  id: z.uuid(),
  name: z.string(),
  email,
  role,
  language,
  regionIds: z.array(z.uuid()),
  /** What growers may call; null for none. */
  phone: z.string().nullable(),
});
export type Me = z.infer<typeof me>;

export const account = z.object({
  id: z.uuid(),
  name: z.string(),
  email,
  role,
  language,
  status: accountStatus,
  regionIds: z.array(z.uuid()),
  createdAt: z.iso.datetime(),
  lastSignedInAt: z.iso.datetime().nullable(),
});
export type Account = z.infer<typeof account>;

export const signInInput = z.object({
  email: z.string().trim().min(1).max(254),
  password: z.string().min(1).max(200),
});
export type SignInInput = z.infer<typeof signInInput>;

export const newAccountInput = z.object({
  name: z.string().trim().min(1).max(120),
  email: z.string().trim().toLowerCase().pipe(email),
  password: newPassword,
  role,
  language,
  regionIds: z.array(z.uuid()).max(50),
});
export type NewAccountInput = z.infer<typeof newAccountInput>;

export const accountChangeInput = z
  .object({
    role,
    language,
    regionIds: z.array(z.uuid()).max(50),
    status: accountStatus,
  })
  .partial();
export type AccountChangeInput = z.infer<typeof accountChangeInput>;

/** What everybody may change of their own account. */
export const ownChangeInput = z.object({ language, phone: phoneNumber.nullable() }).partial();
export type OwnChangeInput = z.infer<typeof ownChangeInput>;

export const auditEvent = z.object({
  id: z.number().int(),
  at: z.iso.datetime(),
  actorName: z.string().nullable(),
  action: z.string(),
  subjectKind: z.string(),
  subjectId: z.string(),
  detail: z.record(z.string(), z.unknown()),
});
export type AuditEvent = z.infer<typeof auditEvent>;

export const signIn = defineContract({
  method: 'POST',
  path: '/api/session',
  access: 'anyone',
  body: signInInput,
  reply: z.object({ me }),
});

export const signOut = defineContract({
  method: 'DELETE',
  path: '/api/session',
  access: 'anyone',
  reply: z.object({}),
});

/** Null when nobody is signed in: the first thing the client asks, so not an error. */
export const readMe = defineContract({
  method: 'GET',
  path: '/api/me',
  access: 'anyone',
  reply: z.object({ me: me.nullable() }),
});

export const changeMe = defineContract({
  method: 'PATCH',
  path: '/api/me',
  access: 'signed-in',
  body: ownChangeInput,
  reply: z.object({ me }),
});

export const listAccounts = defineContract({
  method: 'GET',
  path: '/api/accounts',
  access: ['administrator'],
  reply: z.object({ accounts: z.array(account) }),
});

export const createAccount = defineContract({
  method: 'POST',
  path: '/api/accounts',
  access: ['administrator'],
  body: newAccountInput,
  reply: z.object({ account }),
});

export const changeAccount = defineContract({
  method: 'PATCH',
  path: '/api/accounts/:accountId',
  access: ['administrator'],
  params: z.object({ accountId: z.uuid() }),
  body: accountChangeInput,
  reply: z.object({ account }),
});

export const listAuditEvents = defineContract({
  method: 'GET',
  path: '/api/audit-events',
  access: ['administrator'],
  query: z.object({ before: z.coerce.number().int().positive().optional() }),
  reply: z.object({ events: z.array(auditEvent) }),
});
