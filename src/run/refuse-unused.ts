import type { LogKind } from '../identify/log-kind.ts';
import { InputError } from '../problems/input-error.ts';
import type { IdentifyRequest } from './identify-request.ts';

type Option = Exclude<keyof IdentifyRequest, 'logs' | 'read' | 'kind'>;

const NAMES: Readonly<Record<Option, string>> = {
  vehicle: '--vehicle',
  case: '--case',
  fit: '--fit',
  massKg: '--mass-kg',
  rotatingKg: '--rotating-kg',
  airTemperatureC: '--air-temperature-c',
  airPressureHpa: '--air-pressure-hpa',
  airDensityKgM3: '--air-density-kg-m3',
};
const AIR: readonly Option[] = ['airTemperatureC', 'airPressureHpa', 'airDensityKgM3'];

/** What each kind of log makes use of. */
const USED: Readonly<Record<LogKind, readonly Option[]>> = {
  'coast-down': ['vehicle', 'massKg', 'rotatingKg', ...AIR],
  step: [],
  ride: ['vehicle', 'case', 'fit', ...AIR],
};

const KINDS: Readonly<Record<LogKind, string>> = {
  'coast-down': 'a coast-down',
  step: 'a step test',
  ride: 'a ride, whose masses are those of the vehicle file',
};

/**
 * Refuses what a request says and its kind of log would not look at: an option that does nothing is a mistake.
 *
 * @throws InputError `option-without-use`
 */
export function refuseUnused(request: IdentifyRequest, kind: LogKind): void {
  const used = USED[kind].filter((name) => request.case === undefined || !AIR.includes(name));
  const unused = (Object.keys(NAMES) as Option[]).find(
    (name) => request[name] !== undefined && !used.includes(name),
  );
  if (unused === undefined) return;
  const ofCase = request.case !== undefined && AIR.includes(unused);
  throw new InputError({
    code: 'option-without-use',
    place: {},
    message: `${NAMES[unused]} has no use ${ofCase ? 'beside a case, which has its own air' : `for ${KINDS[kind]}`}`,
    found: NAMES[unused],
    allowed: used.length === 0 ? 'the logs alone' : used.map((name) => NAMES[name]).join(', '),
  });
}
