import { describe, expect, it } from 'vitest';
import type { Road } from '../../src/road/road.ts';
import { roadOfTrack } from '../../src/road/road-of-track.ts';
import { layRide } from '../../src/study/lay-ride.ts';
import type { LoggedRide } from '../../src/study/logged-ride.ts';
import type { RideLog } from '../../src/track/read-ride.ts';
import { expectClose } from '../compare.ts';
import { roadOptions, trackOf } from '../road/road-fixtures.ts';
import { randomness } from '../road/synthetic-road.ts';
import { logOf, roadOver, seconds, speedAt, wayAt, winding } from './ridden-road.ts';

const ground = winding();
const road = roadOver(ground);
// 8 km at 16 m/s and a little.
const time = seconds(497);
const lay = (log: RideLog, on: Road = road): LoggedRide => layRide(log, on, 'ridden', 'ridden.csv');
const increases = (values: Float64Array): boolean => values.every((v, i) => i === 0 || v > values[i - 1]!);

/** Largest difference of the rows from the known ride, `edge` rows at both ends left out: way [m], speed [m/s]. */
function worst(ride: LoggedRide, edge = 3, started = 0): { way: number; speed: number; rmsSpeed: number } {
  let [way, speed, sum] = [0, 0, 0];
  for (let i = edge; i < ride.size - edge; i++) {
    const t = ride.time[i]! + started;
    way = Math.max(way, Math.abs(ride.distance[i]! - wayAt(t)));
    // The road rises and falls: over ground along the slope.
    const slope = Math.sqrt(1 + (0.04 * Math.sin(wayAt(t) / 500)) ** 2);
    const off = ride.speed[i]! - speedAt(t) * slope;
    speed = Math.max(speed, Math.abs(off));
    sum += off * off;
  }
  return { way, speed, rmsSpeed: Math.sqrt(sum / (ride.size - 2 * edge)) };
}

describe('a ride over a known road', () => {
  it('comes back with its way within half a metre and its speed within 0.05 m/s, without scatter', () => {
    const ride = lay(logOf(ground, time, wayAt));
    const { way, speed } = worst(ride);
    expect(way).toBeLessThan(0.5);
    expect(speed).toBeLessThan(0.25);
    expect(worst(ride).rmsSpeed).toBeLessThan(0.05);
    expect([ride.laidBy, ride.speedFrom, ride.gaps, ride.pauses]).toEqual(['position', 'way', [], []]);
    expect(increases(ride.distance) && increases(ride.time)).toBe(true);
  });

  // Scatter of 1.5 m in a random direction is 1.06 m along the road; over +-4 s at 1 Hz a slope has 0.19 of that by the sums
  // of its weights (test/numeric/local-regression.test.ts).
  it('comes back with its way within a metre on the whole and its speed as the scatter allows', () => {
    const ride = lay(logOf(ground, time, wayAt, { noise: 1.5 }));
    const { way, rmsSpeed } = worst(ride);
    expect(way).toBeLessThan(2.5);
    expect(rmsSpeed).toBeLessThan(0.3);
    let square = 0;
    ride.distance.forEach((x, i) => {
      square += (x - wayAt(ride.time[i]!)) ** 2;
    });
    expect(Math.sqrt(square / ride.size)).toBeLessThan(0.8);
    expectClose(ride.rmsOffset!, 1.5 / Math.SQRT2, 0.2);
    expectClose(ride.covered, ride.distance.at(-1)! - ride.distance[0]!, 1e-9);
  });

  it('keeps the speed and the throttle of the log where there are any', () => {
    const ride = lay(
      logOf(ground, time, wayAt, {
        noise: 1.5,
        speed: time.map((t) => (t === 100 ? Number.NaN : speedAt(t))),
        throttle: time.map((t) => (t < 50 ? Number.NaN : 0.3)),
      }),
    );
    expect(ride.speedFrom).toBe('log');
    const at = ride.time.indexOf(200);
    expectClose(ride.speed[at]!, speedAt(200), 1e-12);
    // From the way, where the log's own is missing.
    expectClose(ride.speed[ride.time.indexOf(100)]!, speedAt(100), 0.8);
    expect(ride.throttle![at]).toBe(0.3);
    expect(ride.throttle![5]).toBeNaN();
  });

  it('is found on the way back of a road that turns round', () => {
    const both = roadOver(ground, { direction: 'both' });
    const back = logOf(ground, time, (t) => ground.length - wayAt(t), { noise: 1 });
    const ride = lay(back, both);
    expectClose(ride.distance[0]!, ground.length, 20);
    expectClose(ride.distance.at(-1)!, ground.length + wayAt(time.at(-1)!), 3);
    const out = lay(logOf(ground, time, wayAt, { noise: 1 }), both);
    expectClose(out.distance[0]!, 0, 20);
  });

  it('may go out and back where only one way is driven', () => {
    // Out against the road, a turn, and the ride itself.
    const there = (t: number): number => (t < 497 ? ground.length - wayAt(t) : wayAt(t - 497));
    const log = logOf(ground, seconds(994), there, { noise: 1 });
    const ride = lay(log);
    expect(ride.covered).toBeGreaterThan(0.97 * ground.length);
    expect(lay(log, roadOver(ground, { direction: 'back' })).covered).toBeGreaterThan(0.97 * ground.length);
  });
});

describe('a road trimmed at its ends', () => {
  const trimmed = roadOver(ground, { trimEnds: 500 });
  const ride = lay(logOf(ground, time, wayAt, { noise: 1 }), trimmed);

  it('has no row of what was cut off', () => {
    expect(ride.distance[0]).toBeGreaterThanOrEqual(0);
    expect(ride.distance.at(-1)).toBeLessThanOrEqual(ground.length - 1000);
    expect(ride.time[0]).toBe(0);
    expect(ride.covered).toBeLessThanOrEqual(ground.length - 1000);
    expect(ride.covered).toBeGreaterThan(ground.length - 1050);
  });

  it('counts distance from its own start', () => {
    // 500 m are behind the ride when it comes onto the road.
    const first = time.find((t) => wayAt(t) >= 500)!;
    expectClose(ride.distance[0]! + 500, wayAt(first), 20);
    const t = ride.time[100]!;
    const started = wayAt(first) - 500 > ride.distance[0]! - 2 ? first : first + 1;
    expectClose(ride.distance[100]! + 500, wayAt(t + started), 3);
  });
});

describe('what is odd in a ride', () => {
  it('is told as a pause where it stands, and the time goes on without it', () => {
    const stop = (t: number): number => wayAt(t < 200 ? t : Math.max(200, t - 60));
    // To a sudden stand and away again: more than anybody brakes, so that the edges are those of the window.
    const ride = lay(logOf(ground, seconds(557), stop, { noise: 0.7 }));
    expect(ride.pauses.map(({ reason }) => reason)).toEqual(['stood']);
    expectClose(ride.pauses[0]!.at, wayAt(200), 25);
    expectClose(ride.pauses[0]!.duration, 60, 6);
    expectClose(ride.time.at(-1)!, 496, 7);
    expect(increases(ride.distance) && increases(ride.time)).toBe(true);
    expect(Math.min(...ride.speed)).toBeLessThan(2);
  });

  it('is told where it turned back and came again', () => {
    const turned = (t: number): number =>
      t < 200
        ? wayAt(t)
        : t < 208
          ? wayAt(200) - 10 * (t - 200)
          : t < 216
            ? wayAt(200) - 80 + 10 * (t - 208)
            : wayAt(t - 16);
    const ride = lay(logOf(ground, seconds(500), turned, { noise: 0.7 }));
    const back = ride.pauses.find(({ reason }) => reason === 'turned_back')!;
    expectClose(back.at, wayAt(200), 20);
    expectClose(back.duration, 16, 5);
    expect(increases(ride.distance)).toBe(true);
  });

  it('is told as a gap where the log is silent, or off the road', () => {
    const whole = logOf(ground, time, wayAt, { noise: 1 });
    const without = (drop: (i: number) => boolean): RideLog => {
      const kept = [...time.keys()].filter((i) => !drop(i));
      const pick = (values: Float64Array | null): Float64Array => Float64Array.from(kept, (i) => values![i]!);
      return {
        ...whole,
        size: kept.length,
        time: pick(whole.time),
        latitudeDeg: pick(whole.latitudeDeg),
        longitudeDeg: pick(whole.longitudeDeg),
      };
    };
    const silent = lay(without((i) => i > 150 && i < 180));
    expect(silent.gaps).toHaveLength(1);
    expectClose(silent.gaps[0]!.from, wayAt(150), 3);
    expectClose(silent.gaps[0]!.to, wayAt(180), 3);
    expect(silent.gaps[0]!.reason).toBe('no fix for 30 s');
    expectClose(silent.covered, wayAt(496) - (wayAt(180) - wayAt(150)), 25);
    expect(worst(silent).way).toBeLessThan(3);

    const aside = {
      ...whole,
      latitudeDeg: whole.latitudeDeg!.map((lat, i) => (i > 150 && i < 180 ? lat + 0.002 : lat)),
    };
    const off = lay(aside);
    expect(off.gaps.map(({ reason }) => reason)).toEqual(['29 fixes off the road']);
  });

  it('keeps its speed where it leaves the road at a slant, and comes back to it', () => {
    // East along the equator at 16 m/s; a detour of 40 s out and 40 s back at 30 degrees, as where a plan cuts a bend off.
    const degree = (Math.PI * 6378137) / 180;
    const east = (t: number): number =>
      16 * (t - (1 - Math.cos(Math.PI / 6)) * Math.min(80, Math.max(0, t - 100)));
    const north = (t: number): number => 8 * Math.max(0, 40 - Math.abs(t - 140));
    const distance = Float64Array.from({ length: 401 }, (_, i) => 10 * i);
    const straight = roadOfTrack(
      trackOf(distance, {
        latitudeDeg: new Float64Array(401),
        longitudeDeg: distance.map((x) => x / degree),
        grade: new Float64Array(401),
      }),
      roadOptions({ elevationSource: 'exact' }),
    );
    const random = randomness(17);
    const log = logOf(ground, seconds(240), () => 0, {
      latitudeDeg: seconds(240).map((t) => (north(t) + 0.7 * random.normal()) / degree),
      longitudeDeg: seconds(240).map((t) => (east(t) + 0.7 * random.normal()) / degree),
    });
    const ride = lay(log, straight);
    expect(ride.gaps[0]!.reason).toMatch(/^\d+ fixes off the road$/);
    expect(ride.size).toBeGreaterThan(140);
    for (const speed of ride.speed) expect(Math.abs(speed - 16)).toBeLessThan(1.4);
  });

  it('changes nothing where a ride is silent at its stop, as loggers are that rest', () => {
    const parts = seconds(557).filter((t) => t <= 200 || t >= 260);
    const ride = lay(logOf(ground, parts, (t) => wayAt(t <= 200 ? t : t - 59.5), { noise: 0.5 }));
    expect(ride.gaps).toEqual([]);
    expectClose(ride.pauses[0]!.duration, 60, 1e-9);
  });
});

describe('a ride is refused', () => {
  const problem = (log: RideLog, on = road): string => {
    try {
      lay(log, on);
    } catch (error) {
      return String(error);
    }
    return 'laid';
  };

  it('that goes the other way', () => {
    const against = logOf(ground, time, (t) => ground.length - wayAt(t), { noise: 1 });
    expect(problem(against)).toMatch(/ridden\.csv.*the other way.*km against/s);
  });

  it('that is elsewhere, or covers next to nothing', () => {
    const elsewhere = logOf(ground, time, wayAt, { latitudeDeg: time.map((t) => 10 + t / 1000) });
    expect(problem(elsewhere)).toMatch(/ridden\.csv.*too little.*0\.00 km of 8\.00 km.*10 %/s);
    expect(problem(logOf(ground, seconds(30), wayAt))).toMatch(/too little/);
  });
});

describe('a ride without positions, or over a road that has none', () => {
  const nowhere: Road = { ...road, latitudeDeg: null, longitudeDeg: null };

  it('is laid by its own distances, from the start of the driven road', () => {
    const byDistance = logOf(ground, time, wayAt, {
      latitudeDeg: null,
      longitudeDeg: null,
      distance: time.map(wayAt),
    });
    for (const on of [road, nowhere]) {
      const ride = lay(byDistance, on);
      expect([ride.laidBy, ride.rmsOffset]).toEqual(['distance', null]);
      expect(worst(ride).way).toBeLessThan(0.05);
      expect(worst(ride).speed).toBeLessThan(0.05);
    }
  });

  it('is laid by the legs of its positions where the road has none', () => {
    const ride = lay(logOf(ground, time, wayAt), nowhere);
    expect(ride.laidBy).toBe('distance');
    // Legs of a second cut the bends.
    expect(Math.abs(ride.distance.at(-1)! - wayAt(496))).toBeLessThan(60);
  });
});

describe('any ride', () => {
  it('comes out in order, finite, on the road, at any rate and with any scatter', () => {
    const random = randomness(91);
    for (let k = 0; k < 24; k++) {
      const step = [0.1, 0.5, 1, 3, 10][k % 5]!;
      const all = Float64Array.from({ length: Math.floor(480 / step) }, (_, i) => i * step);
      const kept = all.filter((_, i) => i < 2 || random.uniform() > 0.15);
      const direction = (['there', 'both'] as const)[k % 2]!;
      const on = roadOver(ground, { direction, trimEnds: k % 3 === 0 ? 300 : 0 });
      const ride = lay(logOf(ground, kept, wayAt, { noise: [0, 0.5, 3, 8][k % 4]!, seed: k }), on);
      expect(increases(ride.distance), `ride ${k}`).toBe(true);
      expect(ride.time.every((t, i) => i === 0 || t >= ride.time[i - 1]!)).toBe(true);
      expect([...ride.distance, ...ride.time, ...ride.speed].every(Number.isFinite)).toBe(true);
      expect(Math.min(...ride.speed)).toBeGreaterThanOrEqual(0);
      expect(ride.distance.at(-1)).toBeLessThanOrEqual(on.distance.at(-1)!);
      expect(ride.covered).toBeLessThanOrEqual(on.distance.at(-1)!);
      let gap = -1;
      for (const { from, to } of ride.gaps) {
        expect(from).toBeGreaterThanOrEqual(gap);
        expect(to).toBeGreaterThan(from);
        gap = to;
      }
    }
  });
});
