import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import {
  identifiedWarnings,
  newIdentifiedVehicle,
  withIdentified,
} from '../../src/case/identified-vehicle.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { InputError } from '../../src/problems/input-error.ts';
import { expectClose } from '../compare.ts';

const found = {
  cda: 0.61234567,
  crr: 0.01523456,
  growth: { c1: 0, c2: 0 },
  mass: null,
  provenance: ['cda_m2 measured', 'crr measured'],
};
const edited = (text: string, more = found as Parameters<typeof withIdentified>[1]) =>
  withIdentified(readVehicleFile(text, 'v.yaml'), more);
const withoutComments = (text: string) => text.replace(/^# (cda_m2|crr) measured\n/gm, '');

describe('a vehicle file with measured numbers', () => {
  test('keeps every other byte of the demo vehicles', () => {
    for (const name of ['proving-125', 'proving-belt', 'proving-e']) {
      const text = readFileSync(new URL(`../../routes/vehicles/${name}.yaml`, import.meta.url), 'utf8');
      const before = readVehicleFile(text, 'v.yaml').file.road_load;
      if (!('cda_m2' in before && 'crr' in before)) throw new Error(`${name} has another road load`);
      const after = edited(text);
      expect(after).toContain('# cda_m2 measured\n# crr measured\nroad_load:');
      const back = withoutComments(after)
        .replace('0.61235', String(before.cda_m2))
        .replace('0.015235', String(before.crr));
      expect(back).toBe(text);
    }
  });

  test('stays in the form of regulations, at the mass and the air of the file', () => {
    const text = `mass: {kerb_kg: 140, rider_kg: 75}
road_load:
  f0_n: 9.1            # from the brochure
  f1_n_per_kmh: 0.2
  f2_n_per_kmh2: 0.0253
  test_mass_kg: 200
  air_density_kg_m3: 1.2
`;
    const after = edited(text);
    const load = readVehicleFile(after, 'v.yaml').file.road_load;
    if (!('f0_n' in load)) throw new Error('another form');
    // m g Crr and 1/2 rho CdA over 3.6 squared
    expectClose(load.f0_n, 200 * 9.80665 * 0.01523456, 1e-3);
    expect(load.f1_n_per_kmh).toBe(0);
    expectClose(load.f2_n_per_kmh2, (0.5 * 1.2 * 0.61234567) / 12.96, 1e-6);
    expect(after).toContain('# from the brochure');
  });

  test('puts coefficients in place of a table that has no place for them', () => {
    const text = 'mass: {kerb_kg: 140}\nroad_load: {published: UN GTR 2}\nname: after\n';
    expect(edited(text)).toBe(
      'mass: {kerb_kg: 140}\n# cda_m2 measured\n# crr measured\nroad_load: {cda_m2: 0.61235, cda_yaw_per_rad2: 0, crr: 0.015235}\nname: after\n',
    );
    expect(() => edited(text, { ...found, crr: null })).toThrow(InputError);
  });

  test('tells what a form that gave way had in it, and nothing where both numbers have their places', () => {
    const told = (load: string, more: Partial<typeof found> = {}) =>
      identifiedWarnings(readVehicleFile(`mass: {kerb_kg: 140}\nroad_load: ${load}\n`, 'v.yaml'), {
        ...found,
        ...more,
      }).map(({ code, message }) => `${code}: ${message}`);
    const table = '{cda_table: [{yaw_deg: 0, cda_m2: 0.5}, {yaw_deg: 18, cda_m2: 0.6}], crr: 0.01}';
    expect(told(table)).toEqual([expect.stringMatching(/^road-load-replaced: .* cda_table .* 18°/)]);
    expect(told('{cda_m2: 0.5, tyre_pressure_bar: 2.2}')).toEqual([
      expect.stringMatching(/^road-load-replaced: .* tyre_pressure_bar \(2\.2 bar\)/),
    ]);
    expect(told('{published: UN GTR 2}')).toEqual([expect.stringContaining('published table')]);
    expect(told('{cda_m2: 0.5, crr: 0.01}')).toEqual([]);
    expect(told('{f0_n: 9, f2_n_per_kmh2: 0.02}')).toEqual([]);
    const nothing = { cda: null, crr: null } as unknown as Partial<typeof found>;
    expect(told(table, nothing)).toEqual([]);
  });

  test('changes the kerb mass, so that the loaded mass is what was measured', () => {
    const text = 'mass: {kerb_kg: 140, rider_kg: 75, payload_kg: 5}\nroad_load: {cda_m2: 0.5, crr: 0.01}\n';
    const { file } = readVehicleFile(edited(text, { ...found, mass: 226.5 }), 'v.yaml');
    expect(file.mass).toMatchObject({ kerb_kg: 146.5, rider_kg: 75, payload_kg: 5 });
  });

  test('keeps a growth of the rolling coefficient that the fit had in it, in each form', () => {
    const growth = { c1: 1e-4, c2: 2e-6 };
    const filed =
      'mass: {kerb_kg: 200}\nroad_load: {cda_m2: 0.5, crr: 0.01, crr_v_s_per_m: 1.0e-4, crr_v2_s2_per_m2: 2e-6}\n';
    expect(withoutComments(edited(filed, { ...found, growth }))).toBe(
      filed.replace('0.5', '0.61235').replace('0.01,', '0.015235,'),
    );
    expect(edited(filed)).toContain('crr_v_s_per_m: 0, crr_v2_s2_per_m2: 0');
    const regulated =
      'mass: {kerb_kg: 200}\nroad_load: {f0_n: 20, f1_n_per_kmh: 0.0545, f2_n_per_kmh2: 0.025}\n';
    const load = readVehicleFile(edited(regulated, { ...found, growth: { c1: 1e-4, c2: 0 } }), 'v.yaml').file
      .road_load;
    // 1e-4 s/m times 200 kg times 9.80665 m/s2, over 3.6
    expect(load).toMatchObject({ f1_n_per_kmh: 0.054481 });
    expect(
      edited('mass: {kerb_kg: 200}\nroad_load: {cda_m2: 0.5, tyre_pressure_bar: 2.2}\n', {
        ...found,
        growth,
      }),
    ).toContain('crr: 0.015235, crr_v_s_per_m: 0.0001, crr_v2_s2_per_m2: 0.000002');
  });

  test('changes a form that belongs to the loaded mass with that mass', () => {
    const text = 'mass: {kerb_kg: 200}\nroad_load: {f0_n: 20, f1_n_per_kmh: 0.05, f2_n_per_kmh2: 0.025}\n';
    const massAlone = { ...found, cda: null, crr: null, mass: 220 };
    expect(readVehicleFile(edited(text, massAlone), 'v.yaml').file.road_load).toMatchObject({
      f0_n: 22,
      f1_n_per_kmh: 0.055,
      f2_n_per_kmh2: 0.025,
    });
    const own = text.replace('f0_n', 'test_mass_kg: 190, f0_n');
    expect(readVehicleFile(edited(own, massAlone), 'v.yaml').file.road_load).toMatchObject({ f0_n: 20 });
  });

  test('can be a new one, which says what is a stand-in', () => {
    const text = newIdentifiedVehicle({
      cda: 0.61234567,
      crr: 0.01523456,
      mass: 215,
      rotatingMass: 8.6,
      provenance: ['measured'],
      massWords: 'Given.',
    });
    const { file } = readVehicleFile(text, 'v.yaml');
    expect(file.road_load).toMatchObject({ cda_m2: 0.61235, crr: 0.015235 });
    expect(file.mass).toMatchObject({ kerb_kg: 215, rotating_kg: 8.6 });
    expect(text).toContain('Not measured: an invented drive');
  });
});
