import { fileURLToPath } from 'node:url';
import { buildClient } from '#server/setup/build-product.mjs';

/** Builds the client that the browser is given, unless it is built from these very sources already. */
export async function setup(): Promise<void> {
  await buildClient(fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, ''));
}
