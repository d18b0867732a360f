/** A PostgreSQL for one run of the tests; close stops and deletes it. */
export function openTestCluster(projectRoot: string): Promise<{ url: string; close: () => void }>;
