/** What the program's exit status says. */
export const DONE = 0;
/** Done, but a requirement is not met, or could not be judged. */
export const NOT_MET = 1;
/** The input (or the place for the output) was refused. */
export const REFUSED = 2;
/** A numerical failure. */
export const NUMERICAL_FAILURE = 3;
/** A fault of the program (EX_SOFTWARE of sysexits.h). */
export const PROGRAM_FAULT = 70;
