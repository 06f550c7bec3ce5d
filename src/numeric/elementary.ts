/**
 * Elementary functions of real numbers that give the same bits on every engine: sums, products, quotients, square
 * roots and moves of bits only. The functions of the language's own `Math` may differ in the last place between
 * engines and versions, and a run must not.
 *
 * Ported from fdlibm, the freely distributable mathematical library:
 *
 *   Copyright (C) 1993-2004 by Sun Microsystems, Inc. All rights reserved.
 *   Developed at SunSoft / SunPro, a Sun Microsystems, Inc. business.
 *   Permission to use, copy, modify, and distribute this software is freely granted, provided that this notice
 *   is preserved.
 */
export { exp } from './exponential.ts';
export { asin, atan, atan2 } from './inverse-trigonometric.ts';
export { log } from './logarithm.ts';
export { pow } from './power.ts';
export { cos, sin, tan } from './trigonometric.ts';
