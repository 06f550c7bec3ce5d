import type * as z from 'zod';
import type { caseSchema } from './case-schema.ts';
import type { Rule, RuleFault } from './check-file.ts';
import { placesInOrder } from './place-rules.ts';

type CaseInput = z.input<typeof caseSchema>;
type RiderInput = NonNullable<CaseInput['rider']>;
type ActInput = NonNullable<RiderInput['does']>[number];
type FaultInput = NonNullable<CaseInput['faults']>[number];

/** What no single field of the rider, the unit and the faults of the sensor can say. */
export const riderRules: readonly Rule<CaseInput>[] = [
  {
    about: ['rider', 'does'],
    check: ({ rider }) => [
      ...placesInOrder(rider?.does ?? [], ['rider', 'does'], 'what the rider does is not in order'),
      ...noTaps(rider?.does ?? []),
    ],
  },
  {
    about: ['faults'],
    check: ({ faults }) => {
      const disorder = placesInOrder(faults ?? [], ['faults'], 'the faults are not in order');
      return disorder.length > 0 ? disorder : overlapping(faults ?? []);
    },
  },
  { about: ['rider'], check: ({ rider }) => (rider === undefined ? [] : bendsByTime(rider)) },
  // Those that look at other keys too wait until the whole file has passed the schema.
  { about: [], check: neverEngaged },
  { about: [], check: nothingToResume },
];

function noTaps(acts: readonly ActInput[]): RuleFault[] {
  return acts.flatMap((one, i) =>
    one.act !== 'tap' || one.taps !== 0
      ? []
      : [
          {
            path: ['rider', 'does', i, 'taps'],
            code: 'out-of-range',
            message: 'changes nothing',
            found: '0',
            allowed: 'a whole number from 1 to 100, or below 0 for taps down',
          },
        ],
  );
}

/** Of two faults at once only one could be shown. */
function overlapping(faults: readonly FaultInput[]): RuleFault[] {
  return faults.flatMap((fault, i): RuleFault[] => {
    const before = faults[i - 1];
    if (before === undefined || !('at_s' in fault) || !('at_s' in before)) return [];
    const over = before.at_s + before.for_s;
    if (fault.at_s >= over) return [];
    return [
      {
        path: ['faults', i, 'at_s'],
        code: 'not-in-order',
        message: 'begins before the fault before it is over',
        found: `${fault.at_s} s`,
        allowed: `at least ${over} s`,
      },
    ];
  });
}

/** Bends lie at places: what lies at times cannot be put in order with them. */
function bendsByTime({ bends, does = [] }: RiderInput): RuleFault[] {
  const timed = does.findIndex((one) => 'at_s' in one);
  if (bends === undefined || timed < 0) return [];
  return [
    {
      path: ['rider', 'does', timed, 'at_s'],
      code: 'keys-exclude',
      message: 'has no order with the bends of rider.bends, which lie at places',
      allowed: 'at_km, or no rider.bends',
    },
  ];
}

function neverEngaged({ hold, rider }: CaseInput): RuleFault[] {
  if (hold.starts !== 'by_hand') return [];
  if ((rider?.does ?? []).some(({ act }) => act === 'engage' || act === 'resume')) return [];
  return [
    {
      path: ['hold', 'starts'],
      code: 'never-engaged',
      message: 'hold would be off to the end: nobody engages it',
      found: 'by_hand',
      allowed: 'engaged, or an act: engage in rider.does',
    },
  ];
}

/** Only a rule of the unit ends a hold that the rider did not end. */
function nothingToResume({ rider, supervisor = {} }: CaseInput): RuleFault[] {
  if (rider?.resumes_after_s === undefined) return [];
  const { lowest_speed_kmh, too_slow, too_fast, believable_m_s2 } = supervisor;
  if ([lowest_speed_kmh, too_slow, too_fast, believable_m_s2].some((rule) => rule !== undefined)) return [];
  return [
    {
      path: ['rider', 'resumes_after_s'],
      code: 'nothing-to-resume',
      message: 'has no meaning: no rule of the unit ends hold',
      found: `${rider.resumes_after_s} s`,
      allowed: 'beside one of lowest_speed_kmh, too_slow, too_fast, believable_m_s2 in supervisor',
    },
  ];
}
