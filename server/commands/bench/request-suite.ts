import { sql } from 'drizzle-orm';
import { connectDatabase } from '#server/db.ts';
import { startBuiltServer } from './built-server.ts';
import { median } from './quantile-of.ts';
import { advisorOfRegion, sowRegion, type SownRegion } from './sown-region.ts';

const RUNS = 11;
const WARM_UP = 4;
/** Wall time in which the answer has to be there on a machine that does nothing else. */
const COLD_MS = 300;

/** Wall time of a request, and processor time of the server's process with its threads; PostgreSQL's is not in it. */
type Cost = { wallMs: number; cpuMs: number };

async function costOf(work: () => Promise<unknown>): Promise<Cost> {
  const [from, spent] = [performance.now(), process.cpuUsage()];
  await work();
  const { user, system } = process.cpuUsage(spent);
  return { wallMs: performance.now() - from, cpuMs: (user + system) / 1000 };
}

/** Median of requests, each after `before`, which is not counted. */
async function timeRequests(before: () => Promise<unknown>, work: () => Promise<unknown>): Promise<Cost> {
  const costs: Cost[] = [];
  for (let run = -WARM_UP; run < RUNS; run += 1) {
    await before();
    const cost = await costOf(work);
    if (run >= 0) costs.push(cost);
  }
  return {
    wallMs: median(costs.map(({ wallMs }) => wallMs)),
    cpuMs: median(costs.map(({ cpuMs }) => cpuMs)),
  };
}

/** Signs in and gives a function that reads an address and throws where the answer is none. */
async function openReader(url: string): Promise<(path: string) => Promise<string>> {
  const headers = { 'content-type': 'application/json' };
  const reply = await fetch(`${url}/api/session`, {
    ...{ method: 'POST', headers, body: JSON.stringify(advisorOfRegion) },
  });
  const cookie = reply.headers.get('set-cookie')?.split(';')[0] ?? '';
  return async (path) => {
    const answer = await fetch(`${url}${path}`, { headers: { cookie } });
    if (!answer.ok) throw new Error(`${path} answered ${answer.status}`);
    return answer.text();
  };
}

function listPath({ cropId, regionId, varietyIds }: SownRegion): string {
  const query = {
    cropId,
    regionId,
    currentVarietyId: varietyIds[0] ?? '',
    seasonFrom: '2022',
    seasonTo: '2025',
  };
  return `/api/candidates?${new URLSearchParams(query).toString()}`;
}

/**
 * Prints what the list of all varieties costs from request to answer, over 80 trials of 16 varieties, by the built
 * server: weighed anew, and from store.
 */
export async function benchRequests(projectRoot: string): Promise<void> {
  const server = await startBuiltServer(projectRoot, sowRegion);
  const { db, close } = connectDatabase(server.databaseUrl, () => undefined);
  try {
    const read = await openReader(server.url);
    const path = listPath(server.filled);
    const forget = () => db.execute(sql`truncate stored_answers`);
    const cold = await timeRequests(forget, () => read(path));
    const stored = await timeRequests(
      () => Promise.resolve(),
      () => read(path),
    );
    console.log('## The whole request: 16 varieties in 80 trials, by the built server (R takes no part)\n');
    console.log('| work | wall ms | processor ms, without PostgreSQL | held to | met |');
    console.log('|---|---|---|---|---|');
    const row = (label: string, { wallMs, cpuMs }: Cost, held: string, met: string) =>
      console.log(`| ${[label, wallMs.toFixed(0), cpuMs.toFixed(0), held, met].join(' | ')} |`);
    row('the list, weighed anew', cold, `${COLD_MS} ms wall`, cold.wallMs < COLD_MS ? 'yes' : 'NO');
    row('the list, from store', stored, '', '');
    console.log('');
  } finally {
    await close();
    await server.close();
  }
}
