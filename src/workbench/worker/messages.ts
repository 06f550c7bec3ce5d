import type { Problem } from '../../problems/input-error.ts';
import type { Units } from '../../report/quantity.ts';

/** The texts of a case and its files. A content is sent once and then known by its number. */
export interface StudyMessage {
  /** Name of the case among the files. */
  readonly file: string;
  readonly files: readonly { readonly name: string; readonly content: number }[];
  /** Contents that this worker has not been sent yet. */
  readonly fresh: readonly { readonly content: number; readonly bytes: Uint8Array }[];
}

/** What can be taken out of the last whole run. */
export type Parcel = 'report' | 'data' | 'charts';

export type Question =
  /** The runs alone; `road`: the section on the road too. One that a hand is still moving waits for the one at work. */
  | {
      readonly kind: 'quick';
      readonly number: number;
      readonly study: StudyMessage;
      readonly units: Units;
      readonly road: boolean;
      readonly moving: boolean;
    }
  /** Everything but the matrix. */
  | { readonly kind: 'whole'; readonly number: number; readonly study: StudyMessage; readonly units: Units }
  /** The matrix of the last whole run. */
  | { readonly kind: 'matrix'; readonly number: number }
  /** Files of the last whole run; its matrix is worked out first where that is left to do. */
  | { readonly kind: 'take'; readonly number: number; readonly parcel: Parcel };

/** A section of the page as text: what is between the tags of its element, without its heading. */
export interface SectionText {
  readonly id: string;
  readonly number: number;
  readonly title: string;
  readonly body: string;
}

/** The head of the page. */
export interface HeadText {
  readonly title: string;
  readonly memo: readonly (readonly [name: string, value: string])[];
}

export type Reply =
  | {
      readonly kind: 'quick';
      readonly number: number;
      readonly sentence: string;
      readonly sections: readonly SectionText[];
    }
  | { readonly kind: 'progress'; readonly number: number; readonly share: number; readonly words: string }
  | {
      readonly kind: 'whole';
      readonly number: number;
      readonly head: HeadText;
      readonly sentence: string;
      readonly sections: readonly SectionText[];
      /** Combinations of the matrix that are left to do; 0: none. */
      readonly cells: number;
    }
  | {
      readonly kind: 'taken';
      readonly number: number;
      readonly parcel: Parcel;
      readonly files: readonly { readonly name: string; readonly text: string }[];
    }
  | { readonly kind: 'refused'; readonly number: number; readonly problems: readonly Problem[] }
  /** A fault of the program. */
  | { readonly kind: 'failed'; readonly number: number; readonly message: string };
