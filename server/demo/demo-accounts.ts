import type { Language, Role } from '#shared/account.ts';

export type DemoAccount = {
  name: string;
  email: string;
  password: string;
  role: Role;
  language: Language;
  regions: readonly string[];
};

/** Invented people with addresses at example.org. The passwords are no secret: the start command prints them. */
export const demoAccounts = {
  advisor: {
    name: 'Wren Halloway',
    email: 'advisor@example.org',
    password: 'kitchen-table-26',
    role: 'advisor',
    language: 'en',
    regions: ['upper-velmar', 'lower-velmar', 'sarrow-coast'],
  },
  conseillere: {
    name: 'Maëlle Sauvageot',
    email: 'conseillere@example.org',
    password: 'table-de-cuisine-26',
    role: 'advisor',
    language: 'fr',
    regions: ['upper-velmar', 'orlaine-plateau', 'sarrow-coast'],
  },
  agronomist: {
    name: 'Tobin Achterberg',
    email: 'agronomist@example.org',
    password: 'field-and-stake-26',
    role: 'agronomist',
    language: 'en',
    regions: ['upper-velmar', 'lower-velmar', 'orlaine-plateau'],
  },
  agronome: {
    name: 'Solenne Marr',
    email: 'agronome@example.org',
    password: 'champ-et-piquet-26',
    role: 'agronomist',
    language: 'fr',
    regions: ['lower-velmar', 'orlaine-plateau', 'sarrow-coast'],
  },
  administrator: {
    name: 'Odile Brackwater',
    email: 'administrator@example.org',
    password: 'keys-of-velmar-26',
    role: 'administrator',
    language: 'en',
    regions: [],
  },
} as const satisfies Record<string, DemoAccount>;

export type DemoAccountKey = keyof typeof demoAccounts;
