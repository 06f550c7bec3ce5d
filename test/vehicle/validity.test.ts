import { expect, test } from 'vitest';
import { forceDrive } from '../../src/vehicle/force-drive.ts';
import { validityNotes } from '../../src/vehicle/validity.ts';
import { referenceMotorcycle, textbookCar } from './vehicles.ts';

test('a drive known by its force says what a locked throttle loses by that', () => {
  const words = (peakPower: number | null) => {
    const drive = forceDrive({
      peakForce: 260,
      peakPower,
      closedThrottleForce: 40,
      lag: 0.1,
      derate: 'none',
    });
    return validityNotes(referenceMotorcycle({ drive })).find(({ code }) => code === 'part-throttle-force')
      ?.words;
  };
  expect(words(null)).toContain('does not rise as it slows');
  expect(words(null)).not.toContain('power limit');
  expect(words(8500)).toContain('below the speed at which its power limit sets in');
  expect(validityNotes(textbookCar()).map(({ code }) => code)).not.toContain('part-throttle-force');
});

test('a power limit and altitude derating each bring their own statement, in whole sentences, once', () => {
  const plain = validityNotes(referenceMotorcycle()).map((note) => note.code);
  const spec = { peakForce: 260, closedThrottleForce: 40, lag: 0.1 };
  const limited = forceDrive({ ...spec, peakPower: 8500, derate: 'naturally_aspirated' });
  const notes = validityNotes(referenceMotorcycle({ drive: limited }));
  const codes = notes.map((note) => note.code);
  expect(codes.filter((code) => !plain.includes(code))).toEqual(['ideal-ratio', 'altitude-correction']);
  expect(new Set(codes).size).toBe(codes.length);
  for (const { words } of notes) expect(words).toMatch(/^[A-Z].*\.$/);
});
