/** Name of a file without its folders and its ending. */
export function caseNameOf(file: string): string {
  const base = file.split(/[\\/]/).at(-1) ?? file;
  const dot = base.lastIndexOf('.');
  return dot > 0 ? base.slice(0, dot) : base;
}
