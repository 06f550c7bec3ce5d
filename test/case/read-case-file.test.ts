import { readdirSync, readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { vehicleOf } from '../../src/case/vehicle-of.ts';
import { vehicleOfCase } from '../../src/case/vehicle-of-case.ts';
import { InputError } from '../../src/problems/input-error.ts';

const FIVE_LINES = `track: {profile: [{length_m: 500, grade_pct: 0}, {length_m: 1500, grade_pct: 6}]}
vehicle: proving-125.yaml
hold: {set_speed_kmh: 60}
candidates:
  - {kind: pi, design: {settling_s: 20, overshoot_pct: 1}}
`;
const route = (name: string): string =>
  readFileSync(new URL(`../../routes/${name}`, import.meta.url), 'utf8');

const CASES = readdirSync(new URL('../../routes/', import.meta.url)).filter((name) => name.endsWith('.yaml'));

const VEHICLES = readdirSync(new URL('../../routes/vehicles/', import.meta.url)).map(
  (name) => `vehicles/${name}`,
);

/** What reading throws. */
function refused(read: () => unknown): InputError {
  try {
    read();
  } catch (error) {
    if (error instanceof InputError) return error;
    throw error;
  }
  throw new Error('nothing was refused');
}

it('reads a step of hill in five lines', () => {
  const document = readCaseFile(FIVE_LINES, 'step.yaml');
  expect(FIVE_LINES.trimEnd().split('\n')).toHaveLength(5);
  expect(document.vehicleFile).toBe('proving-125.yaml');
  expect(document.trackFile).toBeNull();
  expect(document.vehicle).toBeNull();
});

it('reads the demo cases and vehicles', () => {
  expect(CASES.length).toBeGreaterThanOrEqual(8);
  for (const name of CASES) {
    const document = readCaseFile(route(name), name);
    expect(route(name).split('\n')[0], name).toContain('invented');
    const vehicle = document.vehicleFile!;
    expect(route(vehicle).split('\n')[0], vehicle).toMatch(/Invented|invented/);
    expect(() => vehicleOfCase(document, readVehicleFile(route(vehicle), vehicle)), name).not.toThrow();
  }
});

it('reads JSON, byte order mark, Windows line ends and aliases as YAML', () => {
  const { file } = readCaseFile(FIVE_LINES, 'step.yaml');
  const given = {
    track: {
      profile: [
        { length_m: 500, grade_pct: 0 },
        { length_m: 1500, grade_pct: 6 },
      ],
    },
    vehicle: 'proving-125.yaml',
    hold: { set_speed_kmh: 60 },
    candidates: [{ kind: 'pi', design: { settling_s: 20, overshoot_pct: 1 } }],
  };
  expect(readCaseFile(JSON.stringify(given, null, '\t'), 'step.json').file).toEqual(file);
  expect(readCaseFile(`\uFEFF${FIVE_LINES.replaceAll('\n', '\r\n')}`, 'step.yaml').file).toEqual(file);
  const aliased = FIVE_LINES.replace('set_speed_kmh: 60', 'set_speed_kmh: &v 60, start_speed_kmh: *v');
  expect(readCaseFile(aliased, 'step.yaml').file.hold.start_speed_kmh).toBe(60);
});

it('lists the defaults that were used, each with a source, and none of what was given', () => {
  const { defaults } = readCaseFile(FIVE_LINES, 'step.yaml');
  const values = Object.fromEntries(defaults.map(({ key, value }) => [key, value]));
  expect(values).toEqual({
    'track.vertical_curve_m': '0',
    'track.start_elevation_m': '0',
    'track.direction': 'there',
    'road.grid_m': '10',
    wind: 'none',
    'air.temperature_c': '15',
    'air.sea_level_pressure_hpa': '1013.25',
    'hold.set_speed_is': 'true_speed',
    'hold.start_speed_kmh': '60',
    'rider.brakes_above_kmh': 'none',
    scheme: 'exact',
    'candidates.0.sample_s': '0.02',
    'candidates.0.computing_delay_s': '0',
    'candidates.0.integration': 'forward',
    'candidates.0.setpoint_ramp_m_s2': 'step',
    'candidates.0.setpoint_weight': '0',
    'candidates.0.anti_windup': '{kind: conditional}',
    'candidates.0.design.at_kmh': '60',
    segments: '{by: length, length_m: 500}',
    'output.series': 'bins',
    'output.bin_m': '10',
  });
  for (const { source, of } of defaults) {
    expect(source).not.toBe('');
    expect(of).toBe('case');
  }
});

it('lists the smoothing only where a track file is smoothed', () => {
  const file = FIVE_LINES.replace(/profile: .*\]/, 'file: a.gpx');
  const keys = readCaseFile(file, 'a.yaml').defaults.map(({ key }) => key);
  expect(keys).toContain('road.elevation_source');
  expect(keys).toContain('road.smoothing_wavelength_m');
});

it('lists the figures of a vehicle that are defaults, worked out', () => {
  const { defaults } = readVehicleFile(
    'mass: {kerb_kg: 150, rider_kg: 50}\nroad_load: {f0_n: 8.69, f2_n_per_kmh2: 0.0252}\ndrive: {kind: force, peak_force_n: 300}\n',
    'v.yaml',
  );
  const values = Object.fromEntries(defaults.map(({ key, value }) => [key, value]));
  expect(values).toMatchObject({
    'mass.payload_kg': '0',
    'mass.rotating_kg': '6', // 4 % of 150
    'road_load.test_mass_kg': '200',
    'road_load.f1_n_per_kmh': '0',
    'road_load.air_density_kg_m3': '1.189',
    'drive.peak_power_kw': 'none',
    'actuator.rate_limit_pct_per_s': 'none',
  });
  expect(defaults.every(({ of }) => of === 'vehicle')).toBe(true);
});

it('keeps the defaults of a vehicle in the case apart from those of the case', () => {
  const inline = FIVE_LINES.replace(
    'proving-125.yaml',
    '{mass: {kerb_kg: 150}, road_load: {cda_m2: 0.5, crr: 0.01}}',
  );
  const document = readCaseFile(inline, 'a.yaml');
  expect(document.vehicleFile).toBeNull();
  expect(document.defaults.some(({ key }) => key.includes('mass'))).toBe(false);
  expect(document.vehicle?.defaults.find(({ key }) => key === 'mass.rotating_kg')?.value).toBe('6');
  expect(document.vehicle?.defaults.find(({ key }) => key === 'drive')?.value).toBe('none');
});

it('tells all problems of a file at once, by line', () => {
  const { problems } = refused(() =>
    readCaseFile(
      FIVE_LINES.replace('grade_pct: 6', 'grade_pct: 600')
        .replace('set_speed_kmh: 60', 'set_speed: 60')
        .replace('overshoot_pct: 1', 'overshoot_pct: 1, zeta: 1'),
      'a.yaml',
    ),
  );
  expect(problems.map(({ place, code }) => [place.line, code])).toEqual([
    [1, 'out-of-range'],
    [3, 'unknown-key'],
    [5, 'unknown-key'],
  ]);
});

it('names file, line, column, key, what was found and what is allowed', () => {
  const { message } = refused(() => readCaseFile(FIVE_LINES.replace('60', '0'), 'step.yaml'));
  expect(message).toBe(
    'step.yaml:3:23: hold.set_speed_kmh: is out of range (found 0; allowed: a number from 1 to 300 km/h)',
  );
});

it('puts overrides in by key, by number, by name and by id, the last one winning', () => {
  const text = route('harrow-gap.yaml');
  const { file } = readCaseFile(text, 'a.yaml', [
    'hold.set_speed_kmh=70',
    'candidates.1.sample_s=0.05',
    'candidates.pi-shipped.kp_pct_per_kmh=2',
    'candidates.pi-shipped.kp_pct_per_kmh=3',
    'requirements.SH-02.at_most=5',
    'output.series=full',
    'hold.changes=[]',
    'wind.terrain=rough',
  ]);
  expect(file.hold.set_speed_kmh).toBe(70);
  expect(file.hold.changes).toEqual([]);
  expect(file.candidates[1]).toMatchObject({ name: 'pi-droop2', sample_s: 0.05 });
  expect(file.candidates[3]).toMatchObject({ name: 'pi-shipped', kp_pct_per_kmh: 3, ti_s: 6 });
  expect(file.requirements[1]).toMatchObject({ id: 'SH-02', at_most: 5 });
  expect(file.output.series).toBe('full');
  expect(file.wind).toMatchObject({ terrain: 'rough' });
});

it('makes the mappings that an override needs', () => {
  const { file } = readCaseFile(FIVE_LINES, 'a.yaml', ['rider.brakes_above_kmh=8', 'road.grid_m=5']);
  expect(file.rider.brakes_above_kmh).toBe(8);
  expect(file.road.grid_m).toBe(5);
});

it('hands on to the vehicle file what reaches into it, and puts it into a vehicle of the case', () => {
  const override = 'vehicle.mass.payload_kg=40';
  const outside = readCaseFile(FIVE_LINES, 'a.yaml', [override, 'hold.set_speed_kmh=50']);
  expect(outside.vehicleOverrides).toEqual([override]);
  expect(
    readVehicleFile(route('vehicles/proving-125.yaml'), 'v.yaml', outside.vehicleOverrides).file.mass
      .payload_kg,
  ).toBe(40);
  const inline = FIVE_LINES.replace(
    'proving-125.yaml',
    '{mass: {kerb_kg: 150}, road_load: {cda_m2: 0.5, crr: 0.01}}',
  );
  const inside = readCaseFile(inline, 'a.yaml', [override]);
  expect(inside.vehicleOverrides).toEqual([]);
  expect(inside.vehicle?.file.mass.payload_kg).toBe(40);
});

it('names the option as typed when the vehicle file refuses its value', () => {
  const { vehicleOverrides } = readCaseFile(FIVE_LINES, 'a.yaml', ['vehicle.mass.payload_kg=-1']);
  const error = refused(() =>
    readVehicleFile(route('vehicles/proving-125.yaml'), 'v.yaml', vehicleOverrides),
  );
  expect(error.message).toBe(
    '--set vehicle.mass.payload_kg=-1: mass.payload_kg: is out of range (found -1; allowed: a number from 0 to 1000 kg)',
  );
});

it.each([
  ['hold.set_speed_kmh=fast', 'not-a-number', '--set hold.set_speed_kmh=fast: hold.set_speed_kmh'],
  ['hold.set_speed_kmh=', 'empty-value', '--set hold.set_speed_kmh='],
  ['hold.speed=60', 'unknown-key', '--set hold.speed=60'],
  ['hold.set_speed_kmh', 'bad-override', 'key=value'],
  ['=60', 'bad-override', 'key=value'],
  ['hold.set_speed_kmh.x=1', 'bad-override', 'inside a plain value'],
  ['candidates.7.sample_s=1', 'bad-override', 'a number from 0 to 0'],
  ['candidates.pi.sample_s=1', 'bad-override', "no item 'pi'"],
  ['hold..x=1', 'bad-override', 'single dots'],
  ['hold.__proto__.x=1', 'bad-override', 'forbidden'],
  ['hold.set_speed_kmh={a: [1', 'bad-override', 'not valid YAML'],
])('refuses the override %s', (override, code, words) => {
  const error = refused(() => readCaseFile(FIVE_LINES, 'a.yaml', [override]));
  expect(error.code).toBe(code);
  expect(error.message).toContain(words);
  expect(error.problems[0]?.place.file).toBe(`--set ${override}`);
});

it('is the same twice, and plain data', () => {
  const once = readCaseFile(route('harrow-gap.yaml'), 'a.yaml');
  expect(structuredClone(once)).toEqual(readCaseFile(route('harrow-gap.yaml'), 'a.yaml'));
});

it('keeps a key named __proto__ a key', () => {
  const { problems } = refused(() => readCaseFile(`${FIVE_LINES}__proto__: {scheme: fast}\n`, 'a.yaml'));
  expect(problems.map(({ code, place }) => [code, place.line])).toEqual([['unknown-key', 6]]);
});

it.each(CASES)(
  'means by each default of %s what it says: written out, nothing changes and none is left',
  (name) => {
    const { file, defaults } = readCaseFile(route(name), name);
    // Words for what is not there have no value to write.
    const values = defaults.filter(({ value }) => !['none', 'step', 'by elevation_source'].includes(value));
    expect(values.length).toBeGreaterThan(5);
    const written = readCaseFile(
      route(name),
      name,
      values.map(({ key, value }) => `${key}=${value}`),
    );
    const left = written.defaults.filter(
      ({ value }) => !['none', 'step', 'by elevation_source'].includes(value),
    );
    expect(left).toEqual([]);
    const plain = (of: typeof file) => ({
      ...of,
      hold: { ...of.hold, start_speed_kmh: of.hold.start_speed_kmh ?? of.hold.set_speed_kmh },
      candidates: of.candidates.map((candidate) =>
        'design' in candidate
          ? {
              ...candidate,
              design: { ...candidate.design, at_kmh: candidate.design.at_kmh ?? of.hold.set_speed_kmh },
            }
          : candidate,
      ),
    });
    expect(plain(written.file)).toEqual(plain(file));
  },
);

it.each(VEHICLES)('means by each default of %s what it says: written out, it is the same vehicle', (name) => {
  const { defaults } = readVehicleFile(route(name), name);
  const values = defaults.filter(({ value }) => value !== 'none');
  expect(values.length).toBeGreaterThan(5);
  const written = readVehicleFile(
    route(name),
    name,
    values.map(({ key, value }) => `vehicle.${key}=${value}`),
  );
  expect(written.defaults.filter(({ value }) => value !== 'none')).toEqual([]);
  expect(vehicleOf(written)).toEqual(vehicleOf(readVehicleFile(route(name), name)));
});
