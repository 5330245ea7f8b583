export function findNodeFault(version: string): string | null;
export function checkNode(): void;
