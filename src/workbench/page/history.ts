/** What was before, what is, and what was undone. */
export class History<T> {
  private past: readonly T[] = [];
  private future: readonly T[] = [];
  private movement: string | null = null;
  private now: T;

  constructor(start: T) {
    this.now = start;
  }

  get present(): T {
    return this.now;
  }
  get canUndo(): boolean {
    return this.past.length > 0;
  }
  get canRedo(): boolean {
    return this.future.length > 0;
  }

  /** @param movement what one hand does without letting go: all of it is one step back; null: a step of its own */
  put(next: T, movement: string | null = null): void {
    if (movement === null || movement !== this.movement) this.past = [...this.past, this.now];
    this.movement = movement;
    this.future = [];
    this.now = next;
  }

  /** The hand let go. */
  rest(): void {
    this.movement = null;
  }

  undo(): void {
    const before = this.past.at(-1);
    if (before === undefined) return;
    this.past = this.past.slice(0, -1);
    this.future = [this.now, ...this.future];
    this.now = before;
    this.movement = null;
  }

  redo(): void {
    const [next, ...rest] = this.future;
    if (next === undefined) return;
    this.past = [...this.past, this.now];
    this.future = rest;
    this.now = next;
    this.movement = null;
  }
}
