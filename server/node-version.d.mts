export function nodeProblem(version: string, range: string): string | null;
