import { readMe } from '#shared/account.ts';
import { readCatalogue } from '#shared/catalogue.ts';
import type { Contract } from '#shared/contract.ts';
import { listWeighUps, readWeighUp } from '#shared/weigh-up.ts';

/** What a page of the client asks for as soon as it is opened. */
export type PageNeeds = {
  /** As the client's own table of addresses writes it. */
  path: string;
  /** The module of the page, which the client fetches when the page is first opened. */
  source: string;
  /** Read for whoever opens the page, with the parameters of its path. */
  asks: readonly Contract[];
};

/** Who is signed in is asked on every page. */
export const everyPageAsks = readMe;

/** The page that whoever is not signed in comes to. */
export const signInPage: PageNeeds = {
  path: '/sign-in',
  source: 'src/features/sign-in/sign-in-page.tsx',
  asks: [],
};

const desk = 'src/features/trial-desk';
const accounts = 'src/features/accounts';

/** The pages by their paths; the first that fits is the page. */
export const clientPages: readonly PageNeeds[] = [
  signInPage,
  { path: '/weigh-ups', source: 'src/features/weigh-up/weigh-ups-page.tsx', asks: [listWeighUps] },
  { path: '/weigh-ups/new', source: 'src/features/weigh-up/new-weigh-up-page.tsx', asks: [readCatalogue] },
  {
    path: '/weigh-ups/:weighUpId',
    source: 'src/features/weigh-up/weigh-up-page.tsx',
    asks: [readWeighUp, readCatalogue],
  },
  { path: '/trials', source: 'src/features/trials/trials-page.tsx', asks: [] },
  { path: '/trials/:trialId', source: 'src/features/trials/trial-page.tsx', asks: [] },
  { path: '/desk', source: `${desk}/desk-page.tsx`, asks: [] },
  { path: '/desk/import', source: `${desk}/import-page.tsx`, asks: [] },
  { path: '/desk/usual-variances', source: `${desk}/usual-variances-page.tsx`, asks: [] },
  { path: '/desk/trials/:trialId', source: `${desk}/desk-trial-page.tsx`, asks: [] },
  { path: '/accounts', source: `${accounts}/accounts-page.tsx`, asks: [] },
  { path: '/accounts/new', source: `${accounts}/new-account-page.tsx`, asks: [] },
  { path: '/accounts/audit-log', source: `${accounts}/audit-log-page.tsx`, asks: [] },
];
