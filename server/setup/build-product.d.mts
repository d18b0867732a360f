/** Builds the client into dist/client where its sources changed since; true when it was built. */
export function buildClient(projectRoot: string): Promise<boolean>;
