import { replay } from '../loop/replay.ts';
import type { FullSeries } from '../loop/result.ts';
import { cellOf } from '../numeric/interpolate.ts';
import type { Road } from '../road/road.ts';
import { fromKmh } from '../units/convert.ts';
import { atCharge } from '../vehicle/at-charge.ts';
import { tiredBattery } from './battery-cause.ts';
import type { Demand, Figure, HillOutcome, Replayed } from './findings.ts';
import { canTell, causeOnHill } from './hill-cause.ts';
import type { HillEvents } from './hill-events.ts';
import type { HillFacts } from './hill-facts.ts';
import { hillPassage, type PassageContext } from './hill-passage.ts';
import {
  excessOf,
  type HillWindow,
  hillWindow,
  passHill,
  planOverWindow,
  windowFrom,
} from './hill-window.ts';
import type { HoldCourse } from './hold-course.ts';
import { lockedCause } from './locked-cause.ts';
import { offOnHill } from './off-on-hill.ts';
import { quasiSteadySpeeds } from './quasi-steady.ts';
import { leversHelp, remediesFor } from './remedies.ts';
import { sensorCause } from './sensor-cause.ts';
import { isSettling, passageOf, thinSeries } from './series-measures.ts';

/** Shown after the recovery [s]; rows of a picture. */
const TAIL = 5;
const PICTURE_ROWS = 400;
/** Simulated and predicted loss may differ by this share, or by half a km/h. */
const AGREES = 0.15;
const AGREES_ABSOLUTE = fromKmh(0.5);

/**
 * What one candidate did on one hill: a replay from the nearest checkpoint with every sample for the figures and the
 * picture, the hand formula from the speed at which it came in, the cause by replays with one limitation less, and
 * what would hold.
 */
export function hillOutcome(replayed: Replayed, hill: HillFacts, context: PassageContext): HillOutcome {
  const { name, result } = replayed;
  if (result.endDistance <= hill.from) return neverReached(name, replayed, hill);
  const off = offOnHill(replayed, hill);
  const { course } = context;
  const { series, first, last, events, recovery } = hillPassage(replayed, hill, context);
  const over = Math.max(last, recovery.over);
  const passage = passageOf(series, first, last, course.settling);
  const predictedChange = predict(replayed, hill, context, series, first);
  const reasons = events.affected
    ? explainAffected(replayed, hill, context, events, predictedChange, series.command[first])
    : { ...off.unaffected, wouldHold: [] };
  return {
    candidate: name,
    affected: events.affected,
    speedChange: passage.extreme,
    predictedChange: off.any ? { none: 'hold was off on some of it' } : predictedChange,
    predictionDiffers: !off.any && differs(passage.extreme, predictedChange),
    timeLost: passage.timeLost,
    timeAtLimit: passage.timeAtLimit,
    recovery: recovery.time,
    ...reasons,
    why: `${reasons.why}${off.words}`,
    picture: thinSeries(series, 0, pictureEnd(series, over), PICTURE_ROWS),
  };
}

function pictureEnd(series: FullSeries, over: number): number {
  const until = series.time[Math.min(over, series.size - 1)] + TAIL;
  let end = Math.min(over, series.size);
  while (end < series.size && series.time[end] < until) end++;
  return end;
}

function predict(
  { plan }: Replayed,
  hill: HillFacts,
  { demand, course }: PassageContext,
  series: FullSeries,
  first: number,
): Figure {
  const { road, vehicle, rider } = plan;
  const locked = plan.controller.kind === 'locked';
  const a = cellOf(road.distance, hill.from);
  const b = Math.min(cellOf(road.distance, hill.until) + 1, road.size - 1);
  let out = locked;
  for (let i = a; i <= b && !out; i++) out = Math.abs(demand.share[i]) > 1;
  if (!out) return { none: 'the demand stays in range: an ideal hold loses nothing here' };
  const speeds = quasiSteadySpeeds(
    {
      road,
      // The loop has no slip, so the formula that checks it has none either.
      vehicle: { ...atCharge(vehicle), traction: null },
      setSpeed: demand.setSpeed,
      gear: demand.gear,
      brakesAbove: rider.brakesAbove,
      // The command: where the throttle is locked anew just here, the actuator is still where it was.
      throttle: locked ? series.command[first] : null,
    },
    a,
    b,
    series.speed[first],
  );
  let extreme = 0;
  for (let i = 0; i < speeds.length; i++) {
    if (isSettling(road.distance[a + i], course.settling)) continue;
    const change = speeds[i] - demand.setSpeed[a + i];
    if (Math.abs(change) > Math.abs(extreme)) extreme = change;
  }
  return extreme;
}

/** Largest departure of the ideal hold, grip in it, from the set speed on the hill [m/s]. */
function idealChange(
  road: Road,
  demand: Demand,
  { from, until }: HillFacts,
  { settling }: HoldCourse,
): number {
  let extreme = 0;
  for (let i = cellOf(road.distance, from); i < road.size && road.distance[i] <= until; i++) {
    if (isSettling(road.distance[i], settling)) continue;
    const change = demand.ideal[i] - demand.setSpeed[i];
    if (Math.abs(change) > Math.abs(extreme)) extreme = change;
  }
  return extreme;
}

function differs(simulated: number, predicted: Figure): boolean {
  if (typeof predicted !== 'number') return false;
  const gap = Math.abs(simulated - predicted);
  return gap > AGREES_ABSOLUTE && gap > AGREES * Math.abs(simulated);
}

/** A fault of the sensor comes first: no replay of a piece of the road has it. */
function explainAffected(
  replayed: Replayed,
  hill: HillFacts,
  context: PassageContext,
  events: HillEvents,
  predicted: Figure,
  command: number,
): Explanation {
  if (replayed.plan.controller.kind === 'locked')
    return { ...lockedCause(replayed.plan, hill, context.demand, command), wouldHold: [] };
  const sensor = sensorCause(replayed, hill, context, events);
  if (sensor.cause !== null) return { ...sensor.cause, wouldHold: [] };
  const found = explainOutcome(replayed, hill, context, events, predicted);
  return { ...found, why: `${found.why}${sensor.words}` };
}

type Explanation = Pick<HillOutcome, 'cause' | 'derating' | 'why' | 'wouldHold'>;

function explainOutcome(
  replayed: Replayed,
  hill: HillFacts,
  { demand, course, band }: PassageContext,
  events: HillEvents,
  predicted: Figure,
): Explanation {
  const { plan } = replayed;
  const { road } = plan;
  const ideal = { change: predicted, gripped: idealChange(road, demand, hill, course) };
  const nearest = hillWindow(hill, road, demand, course);
  const near = windowFrom(nearest, nearest.start, replayed);
  const battery = tiredBattery(replayed, hill);
  // Where no limit was met there is nothing to take away, and no replay can say more.
  if (!events.leftBand || !canTell(plan, hill, events, battery))
    return { ...causeOnHill(plan, hill, near, events, band, 0, ideal, battery), wouldHold: [] };
  const shown = windowThatShows(replayed, near, band);
  if (shown === null)
    return {
      cause: { none: 'started settled before the hill it holds' },
      why: 'Started settled a kilometre and more before the hill, it holds: what came before the hill is to blame.',
      wouldHold: [],
    };
  const { window, excess } = shown;
  const found = causeOnHill(plan, hill, window, events, band, excess, ideal, battery);
  const { cause } = found;
  if (typeof cause !== 'string' || !leversHelp(cause)) return { ...found, wouldHold: [] };
  const speed = demand.setSpeed[cellOf(road.distance, hill.shareAt)];
  const brakePower = (hill.availableForce - hill.requiredForce) * speed;
  return { ...found, wouldHold: remediesFor(plan, hill, window, band, cause, brakePower) };
}

/**
 * The window, or a longer one with what came before the hill, in which the candidate leaves its band as it did in its
 * run. A battery that is hot by then takes the whole way to become so.
 */
function windowThatShows(
  replayed: Replayed,
  near: HillWindow,
  band: number,
): { readonly window: HillWindow; readonly excess: number } | null {
  const { source } = replayed.plan.vehicle.drive;
  const heats = source?.kind === 'battery' && source.heating !== null;
  for (const more of [0, 2000, 4000, ...(heats ? [near.start] : [])]) {
    const window = windowFrom(near, Math.max(0, near.start - more), replayed);
    const excess = excessOf(passHill(planOverWindow(replayed.plan, window), window), band);
    if (excess > 0) return { window, excess };
    if (window.start === 0) return null;
  }
  return null;
}

function neverReached(candidate: string, { plan, result }: Replayed, hill: HillFacts): HillOutcome {
  const { series } = replay(plan, result.checkpoints[0], 0);
  const none = `the run ended ${Math.round(hill.from - result.endDistance)} m before this hill`;
  return {
    candidate,
    affected: false,
    speedChange: 0,
    predictedChange: { none },
    predictionDiffers: false,
    timeLost: 0,
    timeAtLimit: 0,
    recovery: { none },
    cause: { none },
    why: `It did not get here: ${none}.`,
    wouldHold: [],
    picture: thinSeries(series, 0, 0, 1),
  };
}
