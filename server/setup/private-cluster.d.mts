export type PrivateCluster = { url: string; isNew: boolean; wasRunning: boolean; close: () => Promise<void> };

/** The project's own PostgreSQL in .local/postgres, made and started when needed; its last user stops it. */
export function openPrivateCluster(projectRoot: string): Promise<PrivateCluster>;
