import { fromRpm, toKw, toPct, toRpm, toWh } from '../../units/convert.ts';
import type { Belt, Drive, Gearbox } from '../../vehicle/drive.ts';
import type { EnergySource } from '../../vehicle/energy-source.ts';
import { turningRange } from '../../vehicle/turning-range.ts';
import type { RoadLoad, Traction, Vehicle } from '../../vehicle/vehicle.ts';
import {
  fixed,
  forceText,
  powerText,
  type SpeedUnit,
  significant,
  speedText,
  trimmed,
  withUnit,
} from '../quantity.ts';
import { actuatorWords, sensorWords } from './chain-words.ts';
import { hasGears, turns } from './gear-words.ts';

/** A part of the vehicle and what it is, in words with figures. */
export type VehicleRow = readonly [part: string, words: string];

const DRIVES: Readonly<Record<Drive['kind'], string>> = {
  force: 'a force at the wheel, in proportion to the throttle, with one fixed ratio',
  electric: 'an electric drive with one fixed ratio',
  engine: 'a combustion engine with gears',
  variator: 'a combustion engine with a belt variator and a centrifugal clutch',
};

const seconds = (time: number): string => withUnit(significant(time, 2), 's');
const rpm = (shaftSpeed: number): string => withUnit(fixed(toRpm(shaftSpeed)), 'rpm');
const pct = (share: number, digits = 1): string => withUnit(trimmed(toPct(share), digits), '%');

/** What a vehicle is made of, as the loop sees it, from load to sensor. Parts that it does not have say so where that matters. */
export function vehicleRows(vehicle: Vehicle, speed: SpeedUnit): readonly VehicleRow[] {
  const { drive, actuator, sensor, traction } = vehicle;
  const { source, belt } = drive;
  return [
    ['Mass', massWords(vehicle)],
    ['Road load', roadLoadWords(vehicle.roadLoad)],
    ['Drive', driveWords(drive)],
    ...(turns(drive) ? ([['Engine speed', engineWords(drive)]] as const) : []),
    ...(hasGears(drive) ? ([['Gears', gearWords(drive, speed)]] as const) : []),
    ...(hasGears(drive) ? ([['Gearbox', gearboxWords(drive.gearbox)]] as const) : []),
    ...(belt === null ? [] : ([['Belt', beltWords(belt, speed)]] as const)),
    ...(source === null ? [] : ([['Lives on', sourceWords(source)]] as const)),
    ['Throttle actuator', actuatorWords(actuator)],
    ['Speed sensor', sensorWords(sensor, speed)],
    ['Grip', gripWords(traction)],
  ];
}

function massWords({ mass, payload, rotatingMass, drive }: Vehicle): string {
  const kg = (value: number): string => withUnit(trimmed(value, 1), 'kg');
  const inertias = drive.gears.map(({ inertia }) => fixed(inertia, inertia < 9.95 ? 1 : 0));
  const inertia =
    drive.gears.every((gear) => gear.inertia === 0) || drive.gears.length === 0
      ? ''
      : `; what turns before the gear, as a mass: ${withUnit(inertias.join(', '), 'kg')}${hasGears(drive) ? ', from the first gear' : ', at the shortest ratio'}`;
  return `${kg(mass)} with rider and load (${kg(payload)} of it payload); turning wheels as ${kg(rotatingMass)} more${inertia}`;
}

function roadLoadWords({ cda, yawGain, yawTable, c0, c1, c2 }: RoadLoad): string {
  const yaw =
    yawTable === null
      ? yawGain === 0
        ? ''
        : `, growing by ${significant(yawGain)} of itself for each rad² of yaw`
      : ', over yaw as the table has it';
  const linear = c1 === 0 ? '' : ` + ${significant(c1, 2)} s/m v`;
  const square = c2 === 0 ? '' : ` + ${significant(c2, 2)} s²/m² v²`;
  return `drag area ${withUnit(significant(cda), 'm²')}${yaw}; rolling coefficient ${significant(c0)}${linear}${square}`;
}

function driveWords(drive: Drive): string {
  const power = drive.peakPower === null ? '' : `, at most ${powerText(drive.peakPower)}`;
  const gear = hasGears(drive) ? ` in gear ${drive.gear + 1}` : '';
  const regeneration =
    drive.regenerationForce > 0 ? `, regeneration ${forceText(drive.regenerationForce)}` : '';
  const lag =
    drive.lag > 0 ? `; force follows the throttle with a time constant of ${seconds(drive.lag)}` : '; no lag';
  const altitude = drive.derate === 'none' ? '; altitude takes nothing' : '; thin air takes force away';
  return `${DRIVES[drive.kind]}: ${forceText(drive.peakForce)} at full throttle${gear}${power}, ${forceText(drive.closedThrottleForce)} of drag at closed throttle${regeneration}${lag}${altitude}`;
}

function engineWords(drive: Drive): string {
  const top = turningRange(drive, 0).greatest * (drive.belt?.least ?? drive.gears[0]!.ratio);
  const limit = Number.isFinite(top) ? `limited above ${rpm(top)}` : 'no rev limit';
  const stall = drive.stallSpeed > 0 ? `, dies below ${rpm(drive.stallSpeed)}` : '';
  const cut =
    drive.withoutFuelCut === null
      ? 'no fuel cut'
      : `below ${pct(drive.fuelCutBelow)} of throttle the fuel is cut, and the drag steps up`;
  return `idles at ${rpm(drive.idleSpeed)}${stall}, ${limit}; ${cut}`;
}

/** `4.1, 5.6 km/h per 1000 rpm`: the measure of riders. */
function gearWords({ gears, gear }: Drive, speed: SpeedUnit): string {
  const each = gears.map(({ ratio }) => fixed(speed.of(fromRpm(1000) / ratio), 1));
  return `${gears.length}, gear ${gear + 1} engaged at the start; from the first ${withUnit(each.join(', '), speed.name)} at 1000\u00a0rpm`;
}

function gearboxWords(gearbox: Gearbox): string {
  switch (gearbox.kind) {
    case 'fixed':
      return 'stays in its gear for the whole run';
    case 'clutch':
      return `the rider shifts by the plan of the case: a shift cancels hold, the clutch is open and the throttle closed for ${seconds(gearbox.open)}, and hold resumes ${seconds(gearbox.resume)} after it has closed`;
    case 'automatic':
      return `shifts by itself, by lines of shaft speed over throttle with hysteresis; ${seconds(gearbox.gap)} without torque at a shift, at least ${seconds(gearbox.dwell)} from one to the next; hold goes on`;
  }
}

function beltWords({ least, greatest, shaftSpeed, lag }: Belt, speed: SpeedUnit): string {
  const per1000 = (ratio: number): string => speedText(fromRpm(1000) / ratio, speed);
  return `${per1000(greatest)} at 1000\u00a0rpm at its shortest ratio, ${per1000(least)} at its longest; it moves its ratio, with a time constant of ${seconds(lag)}, to where the engine turns at ${fixed(toRpm(shaftSpeed[0]!))} (closed throttle) to ${rpm(shaftSpeed[shaftSpeed.length - 1]!)} (full throttle)`;
}

function sourceWords(source: EnergySource): string {
  if (source.kind === 'fuel') {
    const tank =
      source.capacity === null
        ? 'tank not given'
        : `tank of ${withUnit(significant((1000 * source.capacity) / source.heat), 'l')}`;
    return `fuel of ${withUnit(significant(source.heat / 1e9), 'MJ/l')}, ${tank}; its use goes by shaft speed and torque`;
  }
  const { capacity, charge, reserve, sag, acceptance, heating } = source;
  const energy =
    capacity === null
      ? 'a battery of unknown capacity'
      : `a battery of ${withUnit(fixed(toWh(capacity)), 'Wh')}, ${pct(charge)} full at the start, reserve ${pct(reserve)}`;
  const parts = [
    energy,
    sag === null ? 'its voltage takes no force' : 'force falls with its voltage',
    acceptance === null ? 'it takes all regeneration' : 'a full battery takes less regeneration',
    heating === null
      ? 'no derating by heat'
      : `heat derates it: ${withUnit(significant(toKw(heating.continuousPower), 2), 'kW')} for ever, time constant ${seconds(heating.time)}, down to ${pct(heating.least)} of the force`,
  ];
  return parts.join('; ');
}

function gripWords(traction: Traction | null): string {
  if (traction === null) return 'not known: no limit of grip is applied or checked';
  const metres = (value: number): string => withUnit(trimmed(value, 3), 'm');
  return `friction at most ${trimmed(traction.friction, 2)}; wheelbase ${metres(traction.wheelbase)}, centre of mass ${metres(traction.massCentreAhead)} ahead of the rear contact and ${metres(traction.massCentreHeight)} high`;
}
