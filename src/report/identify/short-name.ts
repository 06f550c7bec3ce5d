/** Name of a run or a step: where there is a single log without its name. */
export const shortName = (name: string, logs: readonly string[]): string =>
  logs.length === 1 && name.startsWith(`${logs[0]} `) ? name.slice(logs[0]!.length + 1) : name;
