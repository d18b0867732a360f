import type { Language, Role } from '#shared/account.ts';

export type DemoAccount = {
  name: string;
  email: string;
  password: string;
  role: Role;
  language: Language;
  /** Of the numbers that are kept for stories. */
  phone: string | null;
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
    phone: '555-0142',
    regions: ['upper-velmar', 'lower-velmar', 'sarrow-coast'],
  },
  conseillere: {
    name: 'Maëlle Sauvageot',
    email: 'conseillere@example.org',
    password: 'table-de-cuisine-26',
    role: 'advisor',
    language: 'fr',
    phone: '555-0187',
    regions: ['upper-velmar', 'orlaine-plateau', 'sarrow-coast'],
  },
  agronomist: {
    name: 'Tobin Achterberg',
    email: 'agronomist@example.org',
    password: 'field-and-stake-26',
    role: 'agronomist',
    language: 'en',
    phone: null,
    regions: ['upper-velmar', 'lower-velmar', 'orlaine-plateau'],
  },
  agronome: {
    name: 'Solenne Marr',
    email: 'agronome@example.org',
    password: 'champ-et-piquet-26',
    role: 'agronomist',
    language: 'fr',
    phone: null,
    regions: ['lower-velmar', 'orlaine-plateau', 'sarrow-coast'],
  },
  administrator: {
    name: 'Odile Brackwater',
    email: 'administrator@example.org',
    password: 'keys-of-velmar-26',
    role: 'administrator',
    language: 'en',
    phone: null,
    regions: [],
  },
} as const satisfies Record<string, DemoAccount>;

export type DemoAccountKey = keyof typeof demoAccounts;
