import { expect, it } from 'vitest';
import {
  bytesOf,
  carried,
  carryCase,
  jsonInPage,
  takesStart,
  withStart,
} from '../../src/run/carried-case.ts';

const CASE = `track: {file: a/road.csv}
vehicle: light.yaml
hold: {set_speed_kmh: 60}
candidates: [{kind: locked, throttle: level}]
logged_rides: [{name: monday, file: ride.csv}]
`;

it('a case is carried with the files that it names, as they are', () => {
  const files: Record<string, string> = {
    'c.yaml': CASE,
    'a/road.csv': 'distance_m,elevation_m\n',
    'light.yaml': 'mass: 1',
    'ride.csv': 'time_s\n',
  };
  const study = carryCase('c.yaml', (name) => new TextEncoder().encode(files[name]));
  expect(study).toEqual({
    file: 'c.yaml',
    files: Object.entries(files).map(([name, text]) => ({ name, text })),
  });
});

it.each([
  ['plain text', [...new TextEncoder().encode('a </script> \u00e9 \u{1f600}')]],
  ['a byte order mark', [0xef, 0xbb, 0xbf, 0x61]],
  ['what is no UTF-8', [0xff, 0xfe, 0x61, 0x00]],
  ['every byte', Array.from({ length: 256 }, (_, i) => i)],
  ['nothing', []],
])('%s comes back byte for byte', (_what, list) => {
  const bytes = Uint8Array.from(list);
  const there = JSON.parse(JSON.stringify(carried('x', bytes)));
  expect([...bytesOf(there)]).toEqual(list);
});

it('JSON in a page can neither end its element nor begin another', () => {
  const value = { text: '</script><!--<script>\u2028' };
  const json = jsonInPage(value);
  expect(json).not.toMatch(/[<\u2028]/);
  expect(JSON.parse(json)).toEqual(value);
});

it('the start of a page is put into it, and can be put in again', () => {
  const page = '<p>$&</p><script type="application/json" id="start">null</script><script>1</script>';
  const study = { file: 'c.yaml', files: [{ name: 'c.yaml', text: 'a: $1 </script>' }] };
  const once = withStart(page, { study });
  expect(once.match(/<\/script>/g)).toHaveLength(2);
  expect(JSON.parse(/id="start">([^<]*)</.exec(once)![1]!)).toEqual({ study });
  expect(withStart(once, null)).toBe(page);
  expect([takesStart(page), takesStart('<html></html>')]).toEqual([true, false]);
  expect(() => withStart('<html></html>', null)).toThrow(RangeError);
});
