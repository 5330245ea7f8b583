export function ensurePackages(project: string, say: (line: string) => void): void;
export function arePackagesInstalled(project: string): boolean;
