/** Every address of the client, in one place. Parameters are written as React Router reads them. */
export const paths = {
  home: '/',
  signIn: '/sign-in',
  weighUps: '/weigh-ups',
  newWeighUp: '/weigh-ups/new',
  weighUp: '/weigh-ups/:weighUpId',
  trials: '/trials',
  trial: '/trials/:trialId',
  trialDesk: '/desk',
  deskImport: '/desk/import',
  usualVariances: '/desk/usual-variances',
  deskTrial: '/desk/trials/:trialId',
  accounts: '/accounts',
  newAccount: '/accounts/new',
  auditLog: '/accounts/audit-log',
} as const;

/** Fills the parameters of a path in: `fillPath(paths.trial, { trialId })`. */
export function fillPath(path: string, params: Record<string, string>): string {
  return path.replace(/:(\w+)/g, (_, name: string) => encodeURIComponent(params[name] ?? ''));
}

/** The sign-in page that leads back to where the person was going. */
export function signInPath(next: string): string {
  return next === paths.home ? paths.signIn : `${paths.signIn}?${new URLSearchParams({ next }).toString()}`;
}

/** Where to go after signing in: only an address of this application, never another host's. */
export function readNext(search: URLSearchParams): string {
  const next = search.get('next') ?? paths.home;
  return next.startsWith('/') && !next.startsWith('//') && !next.startsWith('/\\') ? next : paths.home;
}
