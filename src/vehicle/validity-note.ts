/** Something the vehicle model leaves out or takes for granted: a whole sentence for the report. */
export interface ValidityNote {
  /** Stable, kebab-case. */
  readonly code: string;
  readonly words: string;
}

/** A note and whether it belongs to a vehicle. */
export type NoteRule = readonly [applies: boolean, code: string, words: string];
