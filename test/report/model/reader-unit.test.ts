import { expect, it } from 'vitest';
import { inReaderUnit } from '../../../src/report/model/reader-unit.ts';
import { SPEED_UNITS } from '../../../src/report/quantity.ts';

// 1 mile = 1.609344 km: 100 km/h are 62.1 mph, and 4 % for each km/h are 6.44 % for each mph.
it('sentences in km/h are told in mph where the reader wants that, gains with the speeds', () => {
  expect(inReaderUnit('Holds at 100 km/h; the gain is 4 % per km/h.', SPEED_UNITS.mph)).toBe(
    'Holds at 62.1 mph; the gain is 6.44 % per mph.',
  );
  expect(inReaderUnit('grow to \u22128.0 km/h', SPEED_UNITS.mph)).toBe('grow to \u22125.0 mph');
  expect(inReaderUnit('Holds at 100 km/h.', SPEED_UNITS.kmh)).toBe('Holds at 100 km/h.');
  // Integrals of the error: once, and squared (1 km2/h2 is 0.3861 mph2).
  expect(inReaderUnit('is 100 km/h·s', SPEED_UNITS.mph)).toBe('is 62.1 mph·s');
  expect(inReaderUnit('is 100 (km/h)²·s', SPEED_UNITS.mph)).toBe('is 38.6 mph²·s');
});
