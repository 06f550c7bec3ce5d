import geodesic from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import type { RoadOptions } from '../../src/road/options.ts';
import { roadOfTrack } from '../../src/road/road-of-track.ts';
import { readTrack } from '../../src/track/read-track.ts';
import type { Repair, Track } from '../../src/track/track.ts';
import { expectClose } from '../compare.ts';
import { evenly, roadOptions, trackOf, windFrom } from './road-fixtures.ts';
import { measure, randomness, syntheticRoad } from './synthetic-road.ts';

const wgs84 = geodesic.Geodesic.WGS84;

/** Positions on the ellipsoid by the reference geodesic: legs of 10 m, the azimuth [deg] as a function of distance. */
function course(length: number, azimuthDeg: (x: number) => number, lat = 51, lon = -1): Track {
  const distance = evenly(length, 10);
  const latitudeDeg = new Float64Array(distance.length);
  const longitudeDeg = new Float64Array(distance.length);
  latitudeDeg[0] = lat;
  longitudeDeg[0] = lon;
  for (let i = 1; i < distance.length; i++) {
    const leg = wgs84.Direct(latitudeDeg[i - 1]!, longitudeDeg[i - 1]!, azimuthDeg(distance[i]! - 5), 10);
    latitudeDeg[i] = leg.lat2!;
    longitudeDeg[i] = leg.lon2!;
  }
  return trackOf(distance, { latitudeDeg, longitudeDeg, elevation: distance.map(() => 100) });
}

/** A noisy track with all columns, from a seed. */
function noisyTrack(seed: number, length = 8000): Track {
  const random = randomness(seed);
  const truth = syntheticRoad(random, length, 10);
  const bend = 1 + random.uniform();
  const path = course(length, (x) => 40 + 60 * Math.sin(x / (400 * bend)));
  return { ...path, elevation: measure(random, 'barometric', truth.elevation, 10) };
}

const columns = (track: Track, options: Partial<RoadOptions> = {}) =>
  roadOfTrack(track, roadOptions(options));
const reversed = (a: Float64Array): Float64Array => a.slice().reverse();

describe('road of a track', () => {
  it('climbs by the integral of its grade along the slope, to rounding', () => {
    for (const seed of [1, 2, 3]) {
      const road = columns(noisyTrack(seed));
      let climb = 0;
      // Composite Simpson of sin(atan g) over the station, with g linear: independent of the rule in use.
      for (let i = 1; i < road.size; i++) {
        const ds = road.station[i]! - road.station[i - 1]!;
        for (let k = 0; k < 8; k++) {
          const g = (t: number): number => {
            const grade = road.grade[i - 1]! + (road.grade[i]! - road.grade[i - 1]!) * t;
            return grade / Math.sqrt(1 + grade * grade);
          };
          climb += (ds / 48) * (g(k / 8) + 4 * g((k + 0.5) / 8) + g((k + 1) / 8));
        }
        expectClose(road.elevation[i]! - road.elevation[0]!, climb, 1e-9, `climb to knot ${i}`);
      }
    }
  });

  it('has stations along the slope: 10 m of 30 % are 10.44 m', () => {
    const distance = evenly(1000, 10);
    const road = columns(trackOf(distance, { elevation: distance.map((x) => 0.3 * x) }), {
      elevationSource: 'exact',
    });
    expectClose(
      road.station,
      distance.map((x) => x * Math.sqrt(1.09)),
      1e-9,
    );
    expect(road.warnings.filter((w) => w.code === 'steep-grade').length).toBe(1);
    expectClose(Math.max(...road.grade), 0.3, 1e-12, 'grade not clamped');
  });

  it('keeps its knots on the grid and ends where the track ends', () => {
    const distance = Float64Array.from({ length: 334 }, (_, i) => i * 3.0037);
    const road = columns(trackOf(distance, { elevation: distance.map((x) => 0.02 * x) }));
    expectClose(road.distance.slice(0, -1), evenly(1000, 10), 0);
    expect(road.distance[road.size - 1]).toBe(distance[333]);
    expectClose(
      road.grade,
      road.distance.map(() => 0.02),
      1e-9,
    );
  });

  it('flips the grade and keeps length and climb when the route is driven back', () => {
    for (const seed of [4, 5, 6]) {
      const track = noisyTrack(seed);
      const there = columns(track);
      const back = columns(track, { direction: 'back' });
      expectClose(
        back.grade,
        reversed(there.grade).map((g) => -g),
        1e-9,
      );
      expectClose(back.gradeSd, reversed(there.gradeSd), 1e-9);
      expectClose(back.station[back.size - 1]!, there.station[there.size - 1]!, 1e-8);
      expectClose(
        back.heading!.map((psi) => Math.cos(psi)),
        reversed(there.heading!).map((psi) => -Math.cos(psi)),
        1e-6,
      );
      expectClose(
        back.curvature!,
        reversed(there.curvature!).map((k) => -k),
        1e-6,
      );
    }
  });

  it('gives the same headwind when wind and route are reversed together', () => {
    for (const seed of [7, 8]) {
      const track = noisyTrack(seed);
      const there = columns(track, { wind: windFrom(1.1) });
      const back = columns(track, { direction: 'back', wind: windFrom(1.1 + Math.PI) });
      expectClose(back.headwind, reversed(there.headwind), 1e-5);
      expectClose(back.crosswind, reversed(there.crosswind), 1e-5);
    }
  });

  it('climbs the same on a 5 m and a 10 m grid', () => {
    for (const seed of [9, 10, 11]) {
      const track = noisyTrack(seed, 20_000);
      const fine = columns(track, { grid: 5 });
      const coarse = columns(track, { grid: 10 });
      const net = (road: typeof fine): number => road.elevation[road.size - 1]! - road.elevation[0]!;
      const gross = (road: typeof fine): number =>
        road.elevation.reduce((sum, z, i, all) => sum + Math.max(0, i === 0 ? 0 : z - all[i - 1]!), 0);
      expectClose(net(fine), net(coarse), 0.05, 'net climb [m]');
      // Central differences see a wave of 200 m by 1.6 % too small on 10 m, by 0.4 % on 5 m: little of the climb is that short.
      expectClose(gross(fine) / gross(coarse), 1, 2e-3, 'gross climb');
    }
  });

  it('knows the azimuth of the ellipsoid within 0.01 degrees', () => {
    for (const [lat, lon, azimuth] of [
      [51, -1, 33],
      [-41, 174, 280],
      [1, 179.98, 90],
      [64, 20, 181],
    ] as const) {
      const road = columns(course(4000, () => azimuth, lat, lon));
      expectClose(
        road.heading!.map((psi) => (psi * 180) / Math.PI),
        road.distance.map(() => azimuth),
        0.01,
      );
      expect(road.longitudeDeg!.every((deg) => deg >= -180 && deg <= 180)).toBe(true);
    }
  });

  it('has the curvature of a circle to the right, and a mean headwind of zero around it', () => {
    // Radius 500 m, driven once round: the azimuth grows by 360 degrees over 2 pi 500 m.
    const round = 2 * Math.PI * 500;
    const road = columns(
      course(3140, (x) => (360 * x) / round),
      { wind: windFrom(1) },
    );
    expectClose(road.curvature!.slice(10, -10), new Float64Array(road.size - 20).fill(1 / 500), 2e-5);
    const mean = road.headwind.reduce((sum, w) => sum + w, 0) / road.size;
    expectClose(mean, 0, 0.02, 'mean headwind [m/s]');
    // Drag goes with va (v + w): over the circle its mean is above still air's v^2 though the wind's mean is zero.
    const drag =
      road.headwind.reduce((sum, w, i) => sum + Math.hypot(20 + w, road.crosswind[i]!) * (20 + w), 0) /
      road.size;
    expect(drag).toBeGreaterThan(400 + 10);
  });

  it('does not turn position noise into wind noise', () => {
    const random = randomness(2);
    const clean = course(5000, () => 70);
    const metre = 1 / 111_200;
    const noisy = {
      ...clean,
      latitudeDeg: clean.latitudeDeg!.map((lat) => lat + metre * random.normal()),
      longitudeDeg: clean.longitudeDeg!.map((lon) => lon + (metre / Math.cos(51 / 57.3)) * random.normal()),
    };
    const road = columns(noisy);
    const raw = Math.SQRT2 / 10;
    const spread = Math.sqrt(
      road.heading!.reduce((sum, psi) => sum + (psi - (70 * Math.PI) / 180) ** 2, 0) / road.size,
    );
    expect(spread).toBeLessThan(raw / 5);
  });

  it('takes a grade column as it is, before elevation', () => {
    const distance = evenly(2000, 10);
    const grade = distance.map((x) => 0.05 * Math.sin(x / 90));
    const road = columns(trackOf(distance, { grade, elevation: distance.map(() => 77) }));
    expectClose(road.grade, grade, 0);
    expectClose(road.gradeSd, new Float64Array(road.size), 0);
    expect(road.smoothing).toBeNull();
    expect(road.elevation[0]).toBe(77);
    expectClose(road.elevation[100]!, 77 + 0.05 * 90 * (1 - Math.cos(1000 / 90)), 0.01);
  });

  it('keeps the climb of a grade column that is denser than the grid', () => {
    const random = randomness(1);
    const distance = evenly(3000, 1);
    const grade = distance.map(() => 0.1 * random.normal());
    let climb = 0;
    for (let i = 1; i < grade.length; i++) climb += (grade[i - 1]! + grade[i]!) / 2;
    const road = columns(trackOf(distance, { grade }));
    // The slope is shorter in plan than along the way by up to 1 - cos(theta); the climb over plan distance stays.
    expectClose(road.elevation[road.size - 1]! - road.elevation[0]!, climb, 0.01);
  });

  it('reads survey elevations without smoothing, and bridges masks in them by a straight line', () => {
    const distance = evenly(2000, 10);
    const elevation = distance.map((x) => 50 + (x * x) / 40_000);
    const road = columns(trackOf(distance, { elevation }), { elevationSource: 'exact' });
    expectClose(
      road.grade,
      distance.map((x) => x / 20_000),
      1e-12,
    );
    expectClose(road.elevation, elevation, 1e-4);
    const dip = elevation.map((z, i) => (distance[i]! > 900 && distance[i]! < 1100 ? z - 30 : z));
    const masks = [{ from: 895, to: 1105, reason: 'viaduct' }];
    const masked = columns(trackOf(distance, { elevation: dip }), { elevationSource: 'exact', masks });
    expectClose(masked.grade, road.grade, 0.006);
  });

  it('lets nothing of the trimmed ends out', () => {
    const whole = noisyTrack(12, 6000);
    const home = (x: number): boolean => x < 500 || x > 5500;
    const repair = (from: number, to: number): Repair => ({
      kind: 'gap',
      from,
      to,
      points: 0,
      line: 3,
      message: 'x',
    });
    const told = {
      ...whole,
      repairs: [repair(100, 100), repair(480, 520), repair(3000, 3100), repair(5900, 5900)],
    };
    // The same track with other ends must give the same road, bit for bit.
    const other = {
      ...told,
      elevation: told.elevation!.map((z, i) => (home(whole.distance[i]!) ? 4000 : z)),
      latitudeDeg: told.latitudeDeg!.map((lat, i) => (home(whole.distance[i]!) ? 10 : lat)),
      longitudeDeg: told.longitudeDeg!.map((lon, i) => (home(whole.distance[i]!) ? 10 : lon)),
    };
    const options = {
      trimEnds: 500,
      masks: [
        { from: 100, to: 300, reason: 'at home' },
        { from: 400, to: 700, reason: 'viaduct' },
      ],
    };
    const road = columns(told, options);
    expect(columns(other, options)).toEqual(road);
    expectClose(road.distance[road.size - 1]!, 5000, 1e-9);
    expect(road.repairs.map((r) => [r.from, r.to])).toEqual([[2500, 2600]]);
    expect(road.masks).toEqual([{ from: 0, to: 200, reason: 'viaduct' }]);
    for (const warning of road.warnings)
      expect([warning.from ?? 0, warning.to ?? 0].every((x) => x >= 0 && x <= 5000)).toBe(true);
    const back = columns(told, { ...options, direction: 'back' });
    expect(back.masks).toEqual([{ from: 4800, to: 5000, reason: 'viaduct' }]);
    expect(back.repairs.map((r) => [r.from, r.to])).toEqual([[2400, 2500]]);
  });

  it('counts the points of the track that it is made from, not its own knots', () => {
    const whole = noisyTrack(18, 6000);
    expect(columns(whole, { grid: 5 }).points).toBe(601);
    expect(columns(whole, { grid: 5 }).size).toBe(1201);
    expect(columns(whole, { trimEnds: 500 }).points).toBe(501);
    expect(columns(whole, { direction: 'both' }).points).toBe(601);
  });

  it('opens the message of every repair with its driven place, however the track was cut or turned', () => {
    const whole = noisyTrack(19, 6000);
    const elevation = whole.elevation!.slice();
    elevation[250] = elevation[250]! + 60;
    elevation[251] = elevation[251]! + 60;
    elevation[400] = elevation[400]! - 60;
    const repairs: Repair[] = [
      {
        kind: 'doubled_point',
        from: 2000,
        to: 2000,
        points: 1,
        line: 419,
        message: 'At km 2.000 (line 419): x.',
      },
      {
        kind: 'gap',
        from: 3000,
        to: 3100,
        points: 0,
        line: 7,
        message: 'From km 3.000 to km 3.100 (line 7): x.',
      },
    ];
    const km = (x: number): string => (x / 1000).toFixed(3);
    for (const options of [{}, { trimEnds: 700 }, { trimEnds: 700, direction: 'back' }] as const) {
      const road = columns({ ...whole, elevation, repairs }, options);
      expect(road.repairs.map(({ kind }) => kind).sort()).toEqual([
        'doubled_point',
        'elevation_spike',
        'elevation_spike',
        'gap',
      ]);
      for (const { from, to, message } of road.repairs) {
        const place = from === to ? `At km ${km(from)}` : `From km ${km(from)} to km ${km(to)}`;
        expect(message.startsWith(`${place}:`) || message.startsWith(`${place} (line `)).toBe(true);
        expect(message.match(/km \d/g)).toHaveLength(from === to ? 1 : 2);
      }
    }
  });

  it('is one drive out and back, with its turn named', () => {
    const track = noisyTrack(13);
    const there = columns(track, { wind: windFrom(2) });
    const both = columns(track, {
      wind: windFrom(2),
      direction: 'both',
      masks: [{ from: 1000, to: 1200, reason: 'viaduct' }],
    });
    const plain = columns(track, { wind: windFrom(2), direction: 'both' });
    expect(plain.turnsAt).toBe(8000);
    expect(plain.size).toBe(2 * there.size);
    expectClose(plain.grade.slice(0, there.size), there.grade, 0);
    expectClose(
      plain.grade.slice(there.size),
      reversed(there.grade).map((g) => -g),
      0,
    );
    expectClose(plain.elevation[plain.size - 1]!, plain.elevation[0]!, 1e-9);
    expectClose(
      plain.headwind.slice(there.size),
      reversed(there.headwind).map((w) => -w),
      0,
    );
    expect(plain.station.every((s, i) => i === 0 || s >= plain.station[i - 1]!)).toBe(true);
    expect(plain.warnings.some((w) => w.code === 'turn-at-speed' && w.from === 8000)).toBe(true);
    expect(both.masks.map((m) => [m.from, m.to])).toEqual([
      [1000, 1200],
      [14_800, 15_000],
    ]);
  });

  it('bridges a gap, says so, and is unsure of the grade there', () => {
    const track = noisyTrack(14);
    const keep = Array.from(track.distance.keys()).filter(
      (i) => track.distance[i]! <= 3000 || track.distance[i]! >= 3600,
    );
    const pick = (a: Float64Array | null): Float64Array => Float64Array.from(keep, (i) => a![i]!);
    const gap = { kind: 'gap', from: 3000, to: 3600, points: 0, line: null, message: 'x' } as const;
    const gapped = { ...trackOf(pick(track.distance), { elevation: pick(track.elevation) }), repairs: [gap] };
    const road = columns(gapped);
    const warning = road.warnings.find((w) => w.code === 'gap-bridged');
    expect([warning?.from, warning?.to]).toEqual([3000, 3600]);
    const most = Math.max(...road.gradeSd.slice(300, 361));
    expect(warning?.message).toContain(
      `one standard deviation of the grade there reaches ${(100 * most).toFixed(1)} %`,
    );
    expect(road.gradeSd[330]!).toBeGreaterThan(2 * road.gradeSd[150]!);
  });

  it('bridges elevations that the reader had to fill, instead of believing them', () => {
    const track = noisyTrack(16);
    const filled = (x: number): boolean => x >= 2000 && x <= 2300;
    const repairs: Repair[] = [
      {
        kind: 'missing_elevation',
        from: 2000,
        to: 2300,
        points: 31,
        line: 9,
        message: 'From km 2.000 to km 2.300 (line 9): elevation is missing at 31 points; interpolated.',
      },
    ];
    const wrong = track.elevation!.map((z, i) => (filled(track.distance[i]!) ? z + 50 : z));
    const road = columns({ ...track, repairs });
    expectClose(columns({ ...track, elevation: wrong, repairs }).grade, road.grade, 0);
    expect(road.warnings.some((w) => w.code === 'long-repair' && w.from === 2000)).toBe(true);
    expect(road.gradeSd[215]!).toBeGreaterThan(1.1 * road.gradeSd[150]!);
    const back = columns({ ...track, repairs }, { direction: 'back' });
    expect(back.repairs[0]!.message).toBe(
      'From km 5.700 to km 6.000 (line 9): elevation is missing at 31 points; interpolated.',
    );
    // A cut inside the filled run moves past it: nothing may lean on what is cut off.
    const cut = columns({ ...track, repairs }, { trimEnds: 2100 });
    expectClose(cut.distance[cut.size - 1]!, 5900 - 2310, 1e-9);
  });

  it('says when points are coarser than the grid, and when the road is short for its smoothing', () => {
    const distance = evenly(300, 50);
    const codes = columns(trackOf(distance, { elevation: distance.map((x) => x / 50) })).warnings.map(
      (w) => w.code,
    );
    expect(codes).toEqual(['interpolated', 'short-for-smoothing', 'ends-uncertain']);
  });

  it('says when something that was given has no effect', () => {
    const distance = evenly(3000, 10);
    const zeros = distance.map(() => 0);
    const track = trackOf(distance, { grade: zeros, headwind: zeros });
    const masks = [
      { from: 100, to: 200, reason: 'viaduct' },
      { from: 4000, to: 4100, reason: 'elsewhere' },
    ];
    const codes = columns(track, { wind: windFrom(0), masks }).warnings.map((w) => w.code);
    expect(codes).toEqual(['headwind-column-used', 'masks-unused', 'mask-outside-road']);
  });

  it('says when a mask or a shelter lies past the end, or reaches past it', () => {
    const distance = evenly(3000, 10);
    const track = trackOf(distance, { elevation: distance.map(() => 50) });
    const stretch = (from: number, to: number) => ({ from, to, reason: 'wood', factor: 0.5 });
    const told = (options: Partial<RoadOptions>): string[] =>
      columns(track, options)
        .warnings.map(({ code }) => code)
        .filter((code) => /road$|end$/.test(code));
    expect(told({ masks: [stretch(2900, 3000.9)], shelter: [stretch(2900, 3000.9)] })).toEqual([]);
    expect(told({ masks: [stretch(2900, 3600)], direction: 'back' })).toEqual(['mask-past-end']);
    expect(told({ shelter: [stretch(2000, 3600), stretch(3000, 3600)] })).toEqual([
      'shelter-outside-road',
      'shelter-past-end',
    ]);
    // What the trimmed ends take away was there.
    expect(told({ masks: [stretch(2500, 2900)], trimEnds: 300 })).toEqual([]);
  });

  it('believes every point of a track that is too sparse to judge them', () => {
    for (const points of [
      [100, 100, 140, 140],
      [100, 100, 160, 100],
      [1, 2, 90, 4, 5, 6, 7, 8, 8],
    ]) {
      const distance = Float64Array.from(points, (_, i) => 1000 * i);
      const road = columns(trackOf(distance, { elevation: Float64Array.from(points) }));
      expect(road.repairs).toEqual([]);
      expectClose(
        points.map((_, i) => road.elevation[100 * i]!),
        points,
        0.5,
      );
    }
  });

  it('still takes a spike out at the ends of a dense track', () => {
    for (const spike of [0, 1, 60, 119, 120]) {
      const distance = evenly(1200, 10);
      const elevation = distance.map((x, i) => 100 + 0.03 * x + (i === spike ? 25 : 0));
      const road = columns(trackOf(distance, { elevation }));
      expect(road.repairs.map(({ kind, from }) => [kind, from])).toEqual([['elevation_spike', 10 * spike]]);
      expectClose(road.grade, new Float64Array(road.size).fill(0.03), 0.001);
    }
  });

  it('refuses what cannot become a road, with stable codes', () => {
    const code = (act: () => unknown): string => {
      try {
        act();
      } catch (error) {
        return (error as { code: string }).code;
      }
      return 'none';
    };
    const distance = evenly(1000, 10);
    const elevation = distance.map(() => 1);
    expect(code(() => columns(trackOf(distance)))).toBe('no-elevation');
    expect(code(() => columns(trackOf(distance, { elevation }), { trimEnds: 495 }))).toBe('road-too-short');
    expect(code(() => columns(trackOf(Float64Array.of(0), { elevation: Float64Array.of(1) })))).toBe(
      'road-too-short',
    );
    expect(
      code(() => columns(trackOf(distance, { elevation }), { masks: [{ from: 0, to: 990, reason: 'all' }] })),
    ).toBe('too-few-elevations');
    expect(code(() => columns(trackOf(distance, { elevation }), { wind: windFrom(0) }))).toBe(
      'wind-needs-heading',
    );
  });

  it('never lets a non-finite number out, on random rough tracks', () => {
    for (let seed = 1; seed <= 60; seed++) {
      const random = randomness(seed);
      const size = 5 + Math.floor(200 * random.uniform());
      const distance = new Float64Array(size);
      for (let i = 1; i < size; i++)
        distance[i] = distance[i - 1]! + (random.uniform() < 0.05 ? 400 : 0.01 + 40 * random.uniform());
      if (distance[size - 1]! < 100) continue;
      const elevation = distance.map(() => Math.round(50 * random.normal()));
      const track = trackOf(distance, {
        elevation,
        latitudeDeg: distance.map(() => 50 + random.normal() * 1e-4),
        longitudeDeg: distance.map(() => 179.9999 + random.normal() * 1e-4),
      });
      const road = columns(track, {
        grid: [1, 5, 10, 50][seed % 4]!,
        elevationSource: (['lidar', 'barometric', 'gnss', 'dem30', 'dem90', 'exact'] as const)[seed % 6]!,
        direction: (['there', 'back', 'both'] as const)[seed % 3]!,
        wind: windFrom(random.uniform()),
      });
      for (const [name, column] of Object.entries(road))
        if (column instanceof Float64Array)
          expect(column.every(Number.isFinite), `${name} of seed ${seed}`).toBe(true);
    }
  });

  it('gives the same road twice', () => {
    expect(columns(noisyTrack(15))).toEqual(columns(noisyTrack(15)));
  });
});

describe('a table of two rows', () => {
  it('is a straight road, and says that nothing is known of what lies between', () => {
    const bytes = new TextEncoder().encode('distance_m,elevation_m\n0,100\n2000,150\n');
    const road = columns(readTrack({ name: 'two.csv', bytes }), { elevationSource: 'gnss' });
    expectClose(road.grade, new Array(road.size).fill(0.025), 1e-12);
    expectClose(road.gradeSd, new Array(road.size).fill(0), 0);
    expectClose(road.elevation[road.size - 1]!, 150, 1e-9);
    expect(road.warnings.map(({ code }) => code)).toContain('two-elevations');
  });
});
