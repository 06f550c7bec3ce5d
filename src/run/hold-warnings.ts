import type { CaseDocument } from '../case/read-case-file.ts';
import { placeOf } from '../case/yaml-source.ts';
import type { RoutePlace } from '../loop/plan.ts';
import type { HoldEvent } from '../loop/result.ts';
import type { Warning } from '../problems/warning.ts';
import type { BendPlan, UnfitPlace } from '../study/bend-plan.ts';
import type { Replayed } from '../study/findings.ts';
import { holdOff, isByRule } from '../study/hold-off.ts';
import { causeWords } from '../study/transient-words.ts';
import { atKm, inKmh, inSeconds } from '../study/wording.ts';

/** So many ends of one kind are told one by one; the rest is counted. */
const TOLD = 3;

/** Bends where hold does not belong, acts that are written within bends, engaging while hold is on; holds that rules ended or refused, and that nobody resumed. */
export function holdWarnings(
  { source }: CaseDocument,
  bends: BendPlan | null,
  replayed: readonly Replayed[],
): readonly Warning[] {
  const inBends = (bends?.written ?? []).map((i): Warning => {
    const place = placeOf(source, ['rider', 'does', i]);
    return {
      code: 'act-in-bend',
      message: `What rider.does has at number ${i + 1} is done as written, where the rider rides a bend by hand.`,
      place,
    };
  });
  return [
    ...(bends?.unfit ?? []).map(unfitWarning),
    ...(bends === null ? [] : tooNearToStart(bends)),
    ...inBends,
    ...engagedWhileOn(source, replayed),
    ...replayed.flatMap(rulesOf),
    ...replayed.flatMap(notResumed),
  ];
}

function unfitWarning({ from, to, reason, bends, lowestSpeed }: UnfitPlace): Warning {
  const many = bends === 1 ? 'a bend' : `${bends} bends`;
  const why =
    reason === 'below_lowest'
      ? `${many} down to ${inKmh(lowestSpeed)}, slower than the unit holds`
      : `${many} down to ${inKmh(lowestSpeed)}, so near to each other that hold would not be worth resuming`;
  return {
    code: 'hold-does-not-belong',
    message: `Speed hold does not belong between ${atKm(from)} and ${atKm(to)}: ${why}.`,
    from,
    to,
  };
}

/**
 * Engaging while hold is on sets the speed of the moment, which nobody who takes it for switching on expects. Behind a
 * grip that is let go for it, it is how a higher speed is set.
 */
function engagedWhileOn(source: CaseDocument['source'], replayed: readonly Replayed[]): Warning[] {
  const found = new Map<number, { readonly event: HoldEvent; readonly names: string[] }>();
  for (const { name, plan, result } of replayed) {
    if (plan.controller.kind === 'locked') continue;
    const acts = (plan.rider.acts ?? []).filter(({ reason }) => reason === 'written');
    let on = plan.hold.starts !== 'by_hand';
    let before: HoldEvent | undefined;
    for (const event of result.holdEvents ?? []) {
      const letGo = before?.kind === 'override_ended' && before.time === event.time;
      if (event.kind === 'engaged' && on && !letGo) {
        const act = acts.findLastIndex(({ at, does }) => does.kind === 'engage' && isBehind(event, at));
        const told = found.get(act);
        if (told === undefined) found.set(act, { event, names: [name] });
        else if (!told.names.includes(name)) told.names.push(name);
      }
      if (event.kind === 'ended') on = false;
      else if (event.kind === 'engaged' || event.kind === 'resumed') on = true;
      before = event;
    }
  }
  return [...found].slice(0, TOLD).map(([act, { event, names }], i): Warning => {
    const { distance, setSpeed } = event;
    const others = names.length > 1 ? ` (so do ${names.slice(1).join(', ')}, each its own)` : '';
    const more = i === TOLD - 1 && found.size > TOLD ? ` So ${found.size - TOLD} times more.` : '';
    return {
      code: 'engage-while-on',
      message: `Hold was on already at ${atKm(distance)}: ${names[0]} takes the speed of the moment, ${inKmh(setSpeed)}, as its set speed${others}.${more}`,
      ...(act < 0 ? {} : { place: placeOf(source, ['rider', 'does', act]) }),
      from: distance,
      to: distance,
    };
  });
}

const isBehind = ({ time, distance }: HoldEvent, at: RoutePlace): boolean =>
  'time' in at ? at.time <= time + 1e-9 : at.distance <= distance + 1e-9;

/** Braking for a bend cannot begin before the road. */
function tooNearToStart({ stops, bends }: BendPlan): Warning[] {
  const [first] = stops;
  if (first === undefined || first.from > 0) return [];
  const bend = bends[first.first];
  if (bend === undefined) return [];
  return [
    {
      code: 'bend-at-start',
      message: `The bend at ${atKm(bend.from)} is nearer to the start than the way to brake for it: the rider comes to it faster than it allows.`,
      from: 0,
      to: bend.to,
    },
  ];
}

/** Why the unit refuses what the rider asks. */
const REFUSALS: Readonly<Partial<Record<HoldEvent['cause'], string>>> = {
  below_lowest_speed: 'the unit holds no speed so low',
  clutch: 'the clutch is pulled',
};

/** Holds that a rule of the unit ended, and what the unit refused. A locked throttle, which has none, refuses without a word. */
function rulesOf({ name, plan, result }: Replayed): Warning[] {
  const events = result.holdEvents ?? [];
  const ended = events.filter((event) => event.kind === 'ended' && isByRule(event));
  const refused = events.filter(({ kind }) => kind === 'refused' && plan.controller.kind !== 'locked');
  return [
    ...told(
      ended,
      'hold-ended',
      ({ distance, measured, setSpeed, ...event }) =>
        `Hold of ${name} ends by itself at ${atKm(distance)}, at ${inKmh(measured)} with ${inKmh(setSpeed)} set: ${causeWords(event)}.`,
    ),
    ...told(
      refused,
      'hold-refused',
      ({ distance, measured, cause }) =>
        `${name} refuses what the rider asks at ${atKm(distance)}, at ${inKmh(measured)}: ${REFUSALS[cause] ?? 'hold is not in a state for it'}.`,
    ),
  ];
}

function told(events: readonly HoldEvent[], code: string, words: (event: HoldEvent) => string): Warning[] {
  return events.slice(0, TOLD).map((event, i) => {
    const more = i === TOLD - 1 && events.length > TOLD ? ` So ${events.length - TOLD} times more.` : '';
    return { code, message: `${words(event)}${more}`, from: event.distance, to: event.distance };
  });
}

function notResumed({ name, plan, result }: Replayed): Warning[] {
  const last = holdOff(plan, result).at(-1);
  if (last === undefined || last.back) return [];
  const since = last.ended === null ? 'from the start' : `from ${atKm(last.from)}`;
  return [
    {
      code: 'hold-not-resumed',
      message: `Hold of ${name} is off ${since} to the end of the run, ${inSeconds(last.until - last.since)}: nobody resumes it.`,
      from: last.from,
      to: last.to,
    },
  ];
}
