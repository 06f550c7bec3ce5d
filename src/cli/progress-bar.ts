/** A bar on one line of a terminal, drawn once the work has passed a second; nothing where no terminal is. */
export class ProgressBar {
  private readonly start = performance.now();
  private readonly stream: NodeJS.WriteStream;
  private drawn = 0;
  private shown = false;

  constructor(stream: NodeJS.WriteStream) {
    this.stream = stream;
  }

  /** @param share of the work that is done, 0 to 1 */
  readonly show = (share: number, words: string): void => {
    const now = performance.now();
    if (this.stream.isTTY !== true || now - this.start < 1000 || now - this.drawn < 100) return;
    this.drawn = now;
    this.shown = true;
    const width = 24;
    const full = Math.round(Math.min(1, Math.max(0, share)) * width);
    const line = `[${'#'.repeat(full)}${'.'.repeat(width - full)}] ${words}`;
    this.stream.write(`\r\x1b[2K${line.slice(0, (this.stream.columns || 80) - 1)}`);
  };

  /** Takes the bar away. */
  clear(): void {
    if (this.shown) this.stream.write('\r\x1b[2K');
    this.shown = false;
  }
}
