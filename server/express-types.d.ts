import type { Me } from '#shared/account.ts';

declare global {
  // Express and passport look for these names.
  namespace Express {
    // eslint-disable-next-line @typescript-eslint/no-empty-object-type -- passport's user is our Me, nothing more
    interface User extends Me {}
  }
}
