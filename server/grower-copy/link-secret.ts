import { createHash, randomBytes } from 'node:crypto';

/** 192 random bits: nobody guesses a link. */
const secretBytes = 24;

/** The secret of a new link, in characters that survive e-mail and paper. */
export const makeLinkSecret = (): string => randomBytes(secretBytes).toString('base64url');

/** What is stored of a secret: it finds the copy again and gives nothing away. */
export const hashLinkSecret = (secret: string): string => createHash('sha256').update(secret).digest('hex');
