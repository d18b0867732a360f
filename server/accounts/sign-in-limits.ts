import type { Request, RequestHandler } from 'express';
import { ipKeyGenerator, rateLimit } from 'express-rate-limit';
import { CodedError } from '#shared/error-codes.ts';

const windowMs = 15 * 60 * 1000;

/** Refused sign-ins in a window: of one address from one place, and of all addresses from one place. */
const refusalsPerAddress = 10;
const refusalsPerPlace = 100;

/** Slows down guessing: only refused sign-ins count, so that a farm office behind one address can work. */
export function limitSignIns(): RequestHandler[] {
  return [
    limitRefusals(refusalsPerAddress, (request) => `${readPlace(request)} ${readAddress(request)}`),
    limitRefusals(refusalsPerPlace, readPlace),
  ];
}

function limitRefusals(limit: number, keyGenerator: (request: Request) => string): RequestHandler {
  return rateLimit({
    windowMs,
    limit,
    keyGenerator,
    skipSuccessfulRequests: true,
    requestWasSuccessful: (_request, response) => response.statusCode !== 401,
    standardHeaders: 'draft-7',
    legacyHeaders: false,
    handler: (_request, _response, next) => next(new CodedError('too-many-attempts')),
  });
}

const readPlace = (request: Request): string => ipKeyGenerator(request.ip ?? '');

function readAddress(request: Request): string {
  const body: unknown = request.body;
  const email = typeof body === 'object' && body !== null && 'email' in body ? body.email : null;
  return typeof email === 'string' ? email.trim().toLowerCase() : '';
}
