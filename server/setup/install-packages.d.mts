/** Whether node_modules holds what package-lock.json asks for. */
export function arePackagesCurrent(projectRoot: string): boolean;
