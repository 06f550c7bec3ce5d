import { describe, expect, it } from 'vitest';
import { demandOf } from '../../src/study/demand.ts';
import { gripBins, gripPlaces } from '../../src/study/grip-places.ts';
import { expectClose } from '../compare.ts';
import { gearedVehicle } from './geared.ts';
import { recordOf, resultOf } from './record-of.ts';
import { roadOf } from './road-of.ts';
import { STIFF } from './scene.ts';
import { HOLD_60, planOf } from './vehicle-of.ts';

const G = 9.80665; // m/s2, standard gravity (CGPM 1901)

describe('places beyond the grip', () => {
  const road = roadOf([
    { length: 1000, grade: 0 },
    { length: 1000, grade: 0.1 },
  ]);
  // 0.3 m g cos x 0.65 / (1.3 -+ 0.3 x 0.6): 367 N forwards and 278 N back on the level.
  const traction = { friction: 0.3, wheelbase: 1.3, massCentreAhead: 0.65, massCentreHeight: 0.6 };
  const vehicle = gearedVehicle({ gear: 0 }, { traction });
  const demand = demandOf(road, vehicle, HOLD_60);
  const rows = Array.from({ length: 20 }, (_, i) => ({
    time: 6,
    setSpeed: 60 / 3.6,
    driveForceMax: i === 3 || i === 4 ? 370 + i : i === 15 ? 366 : 100,
    driveForceMin: i === 8 ? -280 : -20,
  }));
  const run = { name: 'pi', plan: planOf(road, vehicle, STIFF), result: resultOf(recordOf(100, rows)) };

  it('are joined, with the force furthest beyond, the limit there, and whether the road asks for it', () => {
    const weight = 215 * G;
    const cos = 1 / Math.sqrt(1.01);
    const [spin, slide, hill] = gripPlaces(run, demand);
    expect(spin).toMatchObject({ kind: 'spin', from: 300, to: 500, at: 450, force: 374, asked: false });
    expectClose(spin!.limit, (0.3 * weight * 0.65) / (1.3 - 0.18), 1e-9);
    expect(slide).toMatchObject({ kind: 'slide', from: 800, to: 900, force: -280, asked: false });
    expectClose(slide!.limit, (-0.3 * weight * 0.65) / (1.3 + 0.18), 1e-9);
    // On the slope the wheel carries less, and 10 % asks 335 N of the 365: the road is not to blame.
    expect(hill).toMatchObject({ kind: 'spin', from: 1500, to: 1600, asked: false });
    expectClose(hill!.limit, (0.3 * weight * cos * 0.65) / (1.3 - 0.18), 1e-9);
    expect(Array.from(gripBins(run)).map((mark, i) => (mark === 1 ? i : -1))).toEqual(
      rows.map((_, i) => ([3, 4, 8, 15].includes(i) ? i : -1)),
    );
  });

  it('are asked for by the road where the set speed needs as much', () => {
    const icy = gearedVehicle({ gear: 0 }, { traction: { ...traction, friction: 0.25 } });
    const places = gripPlaces({ ...run, plan: { ...run.plan, vehicle: icy } }, demandOf(road, icy, HOLD_60));
    expect(places.find(({ from }) => from >= 1400)).toMatchObject({ asked: true });
  });

  it('are where the front wheel would leave the road first, with the mass high and far back', () => {
    const light = gearedVehicle(
      { gear: 0 },
      { traction: { friction: 1.2, wheelbase: 1.3, massCentreAhead: 0.1, massCentreHeight: 0.8 } },
    );
    const [lift] = gripPlaces({ ...run, plan: { ...run.plan, vehicle: light } }, demand);
    // m g b / h.
    expect(lift).toMatchObject({ kind: 'lift' });
    expectClose(lift!.limit, (215 * G * 0.1) / 0.8, 1e-9);
  });

  it('are none where the grip is not known', () => {
    const unknown = { ...run, plan: { ...run.plan, vehicle: { ...vehicle, traction: null } } };
    expect(gripPlaces(unknown, demand)).toEqual([]);
    expect(Array.from(gripBins(unknown))).toEqual(new Array(20).fill(0));
  });
});
