/**
 * What counts as odd in a track, and how much of it is repaired: beyond these the file is refused. The classes
 * (doubled points, stops, jumps above 70 m/s, gaps above 3 km) are those of published filters for recorded
 * drives (SAE 2012-01-0743 and its successors on road grade); the lengths are chosen so that no repair can move
 * the grade over a hill that the elevation smoothing would keep.
 */

/** Fewer points, or a shorter way [m], are no road; two rows of a table of distances are one: straight. */
export const FEWEST_POINTS = 3;
export const FEWEST_ROWS = 2;
export const SHORTEST_TRACK = 50;

/** Two positions nearer than this are one [m]: half a unit of the sixth decimal of a degree. */
export const SAME_PLACE = 0.05;
/** Slower than this [m/s], and within STANDING_RADIUS [m] of the last point kept, the rider stands still. */
export const STANDING_SPEED = 0.5;
export const STANDING_RADIUS = 10;

/** No road vehicle of this tool is faster [m/s]; a leg that implies more is a jump. */
export const FASTEST = 70;
/** Clocks in files are often cut to whole seconds: allowed on top of each interval [s]. */
export const CLOCK_RESOLUTION = 1;
/** Without times, a point is off the line when both its legs exceed this [m] and JUMP_RATIO times the legs around. */
export const JUMP_LEG = 100;
export const JUMP_RATIO = 10;
/** Points in a row that may be off the line and are left out; a longer way aside is a way. */
export const LONGEST_JUMP = 5;

/** Distance [m] or time [s] may run backwards this far before the file is refused. */
export const LONGEST_DISTANCE_REVERSAL = 50;
export const LONGEST_TIME_REVERSAL = 60;

/**
 * A leg longer than GAP [m], half of the shortest usual smoothing wavelength, and than USUAL_LEGS usual legs is bridged and said;
 * longer than LONGEST_GAP [m] it is refused, in a table of distances only where it is longer than so many usual legs too.
 */
export const GAP = 100;
export const USUAL_LEGS = 5;
export const LONGEST_GAP = 3000;

/** Elevations (and grades, headings, winds, speeds) are interpolated over stretches up to this [m]. */
export const LONGEST_FILL = 300;
/** Elevation of any road [m]; what lies outside stands for "unknown" in many files, such as -9999 or -32768. */
export const LOWEST_ELEVATION = -500;
export const HIGHEST_ELEVATION = 9000;

/** Of all points, at most this share may be left out because they hold no finite number. */
export const LARGEST_NON_FINITE_SHARE = 0.05;

/** Where a file gives both, its distances and the way along its positions may differ by this share. */
export const LARGEST_DISAGREEMENT = 0.1;
