/** CPU seconds of one call, garbage included, and what it gave. */
export function cpu(task) {
  const before = process.cpuUsage();
  const result = task();
  const used = process.cpuUsage(before);
  return { seconds: (used.user + used.system) / 1e6, result };
}
