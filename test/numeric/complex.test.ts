import { describe, expect, test } from 'vitest';
import {
  complex,
  divideComplex,
  expComplex,
  logComplex,
  multiplyComplex,
  powerOfComplex,
  sizeOfComplex,
} from '../../src/numeric/complex.ts';
import { expectClose } from '../compare.ts';

const both = (z: { re: number; im: number }): number[] => [z.re, z.im];

describe('complex numbers', () => {
  test('multiply and divide as on paper', () => {
    expect(both(multiplyComplex(complex(1, 2), complex(3, -4)))).toEqual([11, 2]);
    expect(both(divideComplex(complex(11, 2), complex(3, -4)))).toEqual([1, 2]);
    expectClose(both(divideComplex(complex(1, 1), complex(1e200, 1e200))), [1e-200, 0], 1e-215);
    expect(both(powerOfComplex(complex(1, 1), 8))).toEqual([16, 0]);
    expect(both(powerOfComplex(complex(3, 1), 0))).toEqual([1, 0]);
  });
  test('have their size without overflow', () => {
    expect(sizeOfComplex(complex(3e300, -4e300))).toBe(5e300);
    expect(sizeOfComplex(complex(0, 0))).toBe(0);
  });
  test('obey Euler and undo exp by log', () => {
    expectClose(both(expComplex(complex(0, Math.PI))), [-1, 0], 1.3e-16);
    for (let i = 0; i < 50; i++) {
      const z = complex(-3 + 0.13 * i, -3 + 0.12 * i);
      expectClose(both(logComplex(expComplex(z))), both(z), 1e-14);
    }
  });
});
