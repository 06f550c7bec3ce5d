import type { TunedCandidate, TuneResult } from '../../run/tune-result.ts';
import { FIGURES } from '../../study/figure-table.ts';
import type { OperatingPoint } from '../../study/operating-point.ts';
import { toKmh, toPct, toPctPerKmh } from '../../units/convert.ts';
import { decimalsOf } from '../data/decimals-of.ts';
import { type Cell, type Column, csvText } from '../data/table.ts';
import { closeIds, missedIds } from './requirement-words.ts';

type Tuned = Pick<TuneResult, 'tuned' | 'sheet'>;

const of =
  (cell: (one: TunedCandidate) => Cell): Column<Tuned>['value'] =>
  ({ tuned }, i) =>
    cell(tuned[i]!);

/** A figure of the gains; empty for a locked throttle. */
const gain = (cell: (gains: { readonly kp: number; readonly ki: number }) => Cell): Column<Tuned>['value'] =>
  of(({ controller }) => (controller.kind === 'locked' ? null : cell(controller)));

/** A figure of the worst operating point; empty for what is nothing linear. */
const atWorst =
  (cell: (point: OperatingPoint, one: TunedCandidate, index: number) => Cell): Column<Tuned>['value'] =>
  ({ tuned, sheet }, i) => {
    const one = tuned[i]!;
    const [worst] = one.loop.order;
    return worst === undefined ? null : cell(sheet.points[worst]!, one, worst);
  };

/** The columns of proposals.csv: one row a candidate of the case, then one a proposal. */
export const PROPOSAL_COLUMNS: readonly Column<Tuned>[] = [
  { name: 'candidate', decimals: 0, about: 'name', value: of(({ name }) => name) },
  {
    name: 'design',
    decimals: 0,
    about: 'how a proposal was found; empty for a candidate of the case',
    value: of(({ proposal }) => proposal?.design ?? null),
  },
  {
    name: 'kp_pct_per_kmh',
    decimals: 6,
    about: 'proportional gain, of a schedule that at the set speed',
    value: gain(({ kp }) => toPctPerKmh(kp)),
  },
  {
    name: 'ki_pct_per_kmh_s',
    decimals: 6,
    about: 'integral gain',
    value: gain(({ ki }) => toPctPerKmh(ki)),
  },
  {
    name: 'ti_s',
    decimals: 4,
    about: 'integral time; empty without an integral',
    value: gain(({ kp, ki }) => (ki > 0 ? kp / ki : null)),
  },
  {
    name: 'keeps_bound',
    decimals: 0,
    about:
      'yes: the greatest sensitivity is within the bound at every operating point; empty: nothing linear',
    value: of(({ keeps }) => (keeps === null ? null : keeps ? 'yes' : 'no')),
  },
  {
    name: 'max_sensitivity',
    decimals: 4,
    about: 'greatest sensitivity of all operating points; empty: unstable at one, or nothing linear',
    value: atWorst((_, { loop }, i) => loop.figures[i]!.margins.sensitivity),
  },
  {
    name: 'worst_point',
    decimals: 0,
    about: 'number of the operating point where that is, as in margins.csv',
    value: atWorst((_point, _one, i) => i + 1),
  },
  {
    name: 'worst_speed_kmh',
    decimals: 2,
    about: 'true speed there',
    value: atWorst(({ speed }) => toKmh(speed)),
  },
  {
    name: 'worst_grade_pct',
    decimals: 2,
    about: 'grade there',
    value: atWorst(({ surroundings }) => toPct(surroundings.grade)),
  },
  {
    name: 'worst_headwind_m_s',
    decimals: 2,
    about: 'headwind there, positive against travel',
    value: atWorst(({ surroundings }) => surroundings.headwind),
  },
  {
    name: 'worst_gear',
    decimals: 0,
    about: 'gear there, from 1',
    value: atWorst(({ gear }) => gear + 1),
  },
  {
    name: 'worst_load',
    decimals: 0,
    about: 'name of the load there; own: that of the vehicle file',
    value: atWorst(({ load }) => load ?? 'own'),
  },
  { name: 'run_status', decimals: 0, about: 'how the replay ended', value: of(({ runStatus }) => runStatus) },
  { name: 'cost', decimals: 6, about: 'as the case defines it; empty: none', value: of(({ cost }) => cost) },
  {
    name: 'requirements',
    decimals: 0,
    about: 'requirements of the case that speak of it',
    value: of(({ requirements }) => requirements.length),
  },
  {
    name: 'missed',
    decimals: 0,
    about: 'ids of those that are not met, or could not be judged',
    value: of(({ requirements }) => missedIds(requirements).join(' ') || null),
  },
  {
    name: 'too_close_to_call',
    decimals: 0,
    about: 'ids of those whose limit lies within the spread of the figure',
    value: of(({ requirements }) => closeIds(requirements).join(' ') || null),
  },
  ...FIGURES.filter(({ name }) => name !== 'ledger_residual').map(
    ({ name, definition }): Column<Tuned> => ({
      name,
      decimals: decimalsOf(name),
      about: definition,
      value: of(({ figures }) => figures[name] ?? null),
    }),
  ),
  {
    name: 'words',
    decimals: 0,
    about: 'how the gains were found; empty for a candidate of the case',
    value: of(({ proposal }) => proposal?.words ?? null),
  },
];

/** proposals.csv of a tuning. */
export const proposalsCsv = (result: TuneResult): string =>
  csvText(PROPOSAL_COLUMNS, result, result.tuned.length);
