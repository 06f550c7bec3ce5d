import { toKw, toPct, toWh } from '../../units/convert.ts';
import { binCurve, type Lane } from '../model/bin-curves.ts';
import { type Curve, extentOf } from '../model/columns.ts';
import { gearsChange } from '../model/hold-marks.ts';
import { rideCurves, speedCurve } from '../model/ride-curves.ts';
import type { CandidateView, RideView, View } from '../model/view.ts';

/** What a lane shows, and on which scale. */
export interface LaneLook {
  readonly lane: Lane | 'speed';
  readonly name: string;
  readonly title: string;
  readonly of: (value: number) => number;
  readonly height: number;
  /** Fixed ends of the scale; the curves widen it where it is not `closed`. */
  readonly domain: readonly [number, number];
  readonly closed: boolean;
  /** Figures at the left axis; as many as fit where it is not given. */
  readonly ticks?: number;
}

/** The lanes of a view, from above: what the rider feels, what the throttle does, what it costs. */
export function laneLooks(view: View): readonly LaneLook[] {
  const { speed, result } = view;
  const band = speed.of(result.band);
  const drive = result.vehicle.drive;
  const error = (height: number, reach: number | null): LaneLook => ({
    lane: 'error',
    name: `speed error / ${speed.axis}`,
    title: reach === null ? 'speed error' : 'speed error near the band',
    of: speed.of,
    height,
    domain: reach === null ? [-band * 1.5, band * 1.5] : [-reach, reach],
    closed: reach !== null,
  });
  const all = extentOf([
    ...view.candidates.map((c) => binCurve(c.result.bins, 'error')),
    ...view.rides.flatMap((ride) => rideCurves(ride, 'error')),
  ]);
  const reach = all === null ? 0 : Math.max(-speed.of(all[0]), speed.of(all[1]));
  return [
    // What a rider does is read as a speed.
    ...(view.rides.length > 0 ? [speedLook(view)] : []),
    error(150, null),
    // Where a candidate strays far, the band would be a line: it gets a lane of its own, at its own scale.
    ...(reach > 4 * band ? [error(130, band * 2.5)] : []),
    {
      lane: 'throttle',
      name: 'throttle / %',
      title: 'throttle',
      of: toPct,
      height: 110,
      domain: [toPct(drive.throttleMin), toPct(drive.throttleMax)],
      closed: true,
    },
    ...(gearsChange(view) ? [gearLook(view)] : []),
    {
      lane: 'power',
      name: 'wheel power / kW',
      title: 'wheel power',
      of: toKw,
      height: 110,
      domain: [0, 1],
      closed: false,
    },
    {
      lane: 'energy',
      name: 'wheel energy / Wh',
      title: 'wheel energy',
      of: toWh,
      height: 90,
      domain: [0, 1],
      closed: false,
    },
  ];
}

function speedLook({ speed }: View): LaneLook {
  return {
    lane: 'speed',
    name: `speed / ${speed.axis}`,
    title: 'speed',
    of: speed.of,
    height: 130,
    domain: [Number.POSITIVE_INFINITY, 0],
    closed: false,
  };
}

/** What a candidate fills a lane with. */
export const curveOf = ({ result: { bins } }: CandidateView, lane: LaneLook['lane']): Curve =>
  lane === 'speed' ? speedCurve(bins) : binCurve(bins, lane);

/** What a logged ride fills a lane with, stretch by stretch: nothing where a log cannot know it. */
export const curvesOfRide = (ride: RideView, lane: LaneLook['lane']): readonly Curve[] =>
  lane === 'speed' || lane === 'error' || lane === 'throttle' ? rideCurves(ride, lane) : [];

/** The gears that were engaged, a step from one to the next. */
function gearLook(view: View): LaneLook {
  const [low, high] = extentOf(view.candidates.map((c) => binCurve(c.result.bins, 'gear'))) ?? [1, 1];
  return {
    lane: 'gear',
    name: 'gear',
    title: 'gear',
    of: (gear) => gear,
    height: 26 + 14 * Math.min(5, high - low + 1),
    domain: [low - 0.5, high + 0.5],
    closed: true,
    ticks: Math.min(6, high - low + 1),
  };
}
