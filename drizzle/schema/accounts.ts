import { sql } from 'drizzle-orm';
import {
  check,
  index,
  json,
  pgTable,
  primaryKey,
  text,
  timestamp,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core';
import { regions } from './geography.ts';

/** A person with an account. Growers have none: they hold a link. */
export const users = pgTable(
  'users',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    email: text('email').notNull(),
    name: text('name').notNull(),
    /** For growers, on the copies that they are handed; null for none. */
    phone: text('phone'),
    passwordHash: text('password_hash').notNull(),
    role: text('role', { enum: ['advisor', 'agronomist', 'administrator'] }).notNull(),
    language: text('language', { enum: ['en', 'fr'] })
      .notNull()
      .default('en'),
    status: text('status', { enum: ['active', 'suspended'] })
      .notNull()
      .default('active'),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
    lastSignedInAt: timestamp('last_signed_in_at', { withTimezone: true }),
  },
  (table) => [
    uniqueIndex('users_email_unique').on(sql`lower(${table.email})`),
    check('users_role', sql`${table.role} in ('advisor', 'agronomist', 'administrator')`),
    check('users_language', sql`${table.language} in ('en', 'fr')`),
    check('users_status', sql`${table.status} in ('active', 'suspended')`),
  ],
);

/** The regions an account works in; an administrator sees them all without a row here. */
export const userRegions = pgTable(
  'user_regions',
  {
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    regionId: uuid('region_id')
      .notNull()
      .references(() => regions.id),
  },
  (table) => [
    primaryKey({ columns: [table.userId, table.regionId] }),
    index('user_regions_region_idx').on(table.regionId),
  ],
);

/** Sign-in sessions; column names are those that connect-pg-simple reads and writes. */
export const sessions = pgTable(
  'sessions',
  {
    sid: text('sid').primaryKey(),
    sess: json('sess').notNull(),
    expire: timestamp('expire', { precision: 6 }).notNull(),
  },
  (table) => [index('sessions_expire_idx').on(table.expire)],
);
