import type { Router } from 'express';
import { readCatalogue } from '#shared/catalogue.ts';
import type { Database } from '#server/db.ts';
import { route } from '#server/route.ts';
import { loadCatalogue } from './catalogue-store.ts';

export function addCatalogueRoutes(router: Router, db: Database): void {
  route(router, readCatalogue, () => loadCatalogue(db));
}
