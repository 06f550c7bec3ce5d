export const ROOMS: readonly string[];
export function roomProblems(folder?: string): string[];
