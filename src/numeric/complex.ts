import { atan2, cos, exp, log, sin } from './elementary.ts';

/** A complex number. */
export interface Complex {
  readonly re: number;
  readonly im: number;
}

export const complex = (re: number, im = 0): Complex => ({ re, im });
export const addComplex = (a: Complex, b: Complex): Complex => ({ re: a.re + b.re, im: a.im + b.im });
export const subtractComplex = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im });
export const multiplyComplex = (a: Complex, b: Complex): Complex => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
});

/** a / b without early overflow (R. L. Smith, Communications of the ACM 5 (1962) 435). */
export function divideComplex(a: Complex, b: Complex): Complex {
  if (Math.abs(b.re) >= Math.abs(b.im)) {
    const ratio = b.im / b.re;
    const scale = b.re + b.im * ratio;
    return { re: (a.re + a.im * ratio) / scale, im: (a.im - a.re * ratio) / scale };
  }
  const ratio = b.re / b.im;
  const scale = b.re * ratio + b.im;
  return { re: (a.re * ratio + a.im) / scale, im: (a.im * ratio - a.re) / scale };
}

/** |a|, without early overflow. */
export function sizeOfComplex(a: Complex): number {
  const large = Math.max(Math.abs(a.re), Math.abs(a.im));
  const small = Math.min(Math.abs(a.re), Math.abs(a.im));
  if (large === 0 || large === Number.POSITIVE_INFINITY) return large;
  const ratio = small / large;
  return large * Math.sqrt(1 + ratio * ratio);
}

/** Angle in [-pi, pi] [rad]. */
export const angleOfComplex = (a: Complex): number => atan2(a.im, a.re);

export function expComplex(a: Complex): Complex {
  const size = exp(a.re);
  return { re: size * cos(a.im), im: size * sin(a.im) };
}

/** Principal logarithm. */
export const logComplex = (a: Complex): Complex => ({ re: log(sizeOfComplex(a)), im: angleOfComplex(a) });

/** a to a whole power n >= 0, by squaring. */
export function powerOfComplex(a: Complex, n: number): Complex {
  let result = complex(1);
  let square = a;
  for (let rest = n; rest > 0; rest = Math.floor(rest / 2)) {
    if (rest % 2 === 1) result = multiplyComplex(result, square);
    square = multiplyComplex(square, square);
  }
  return result;
}
