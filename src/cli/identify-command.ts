import { join } from 'node:path';
import { identificationAnswer } from '../report/identify/identification-answer.ts';
import { identificationJson } from '../report/identify/identification-json.ts';
import { renderIdentification } from '../report/identify/render-identification.ts';
import { SPEED_UNITS } from '../report/quantity.ts';
import { identifyLogs } from '../run/identify-logs.ts';
import type { Invocation } from './commands.ts';
import { defaultFolder } from './default-folder.ts';
import { DONE } from './exit-status.ts';
import { numberOption } from './number-option.ts';
import { readBytes } from './read-files.ts';
import { checkFolder, writeResult } from './result-folder.ts';
import { say, tellWarnings } from './tell.ts';
import { targetOf } from './vehicle-target.ts';

const PAGE = 'identify.html';
const MARK = 'identify.json';

/** `ridgehold identify LOG...`: logs become numbers of a vehicle, its file, and a page that says how good they are. */
export function identifyCommand({ operands, values }: Invocation<'identify'>): number {
  const path = values.out ?? join(defaultFolder(operands[0]), 'vehicle.yaml');
  const { folder, name } = targetOf(path, MARK);
  checkFolder(folder, [PAGE, MARK]);
  const result = identifyLogs({
    logs: operands,
    read: (file) => readBytes(file),
    kind: values.kind,
    vehicle: values.vehicle,
    massKg: numberOption(values['mass-kg'], { name: 'mass-kg', unit: 'kg', least: 20, most: 5000 }),
    rotatingKg: numberOption(values['rotating-kg'], { name: 'rotating-kg', unit: 'kg', least: 0, most: 300 }),
    airTemperatureC: numberOption(values['air-temperature-c'], {
      name: 'air-temperature-c',
      unit: 'deg C',
      least: -40,
      most: 55,
    }),
    airPressureHpa: numberOption(values['air-pressure-hpa'], {
      name: 'air-pressure-hpa',
      unit: 'hPa',
      least: 500,
      most: 1090,
    }),
    airDensityKgM3: numberOption(values['air-density-kg-m3'], {
      name: 'air-density-kg-m3',
      unit: 'kg/m3',
      least: 0.5,
      most: 2,
    }),
  });
  const units = values.units ?? 'kmh';
  const mark = identificationJson(result, name, [PAGE]);
  writeResult(
    folder,
    [
      { name, text: result.vehicle },
      { name: PAGE, text: renderIdentification(result, { units, output: name }) },
      { name: MARK, text: mark },
    ],
    [name],
  );
  if (!values.quiet) {
    say(identificationAnswer(result, SPEED_UNITS[units]).sentence);
    tellWarnings(result.warnings, (place) => place);
    say(`The vehicle is at ${join(folder, name)}, how good it is at ${join(folder, PAGE)}`);
  }
  if (values.json) process.stdout.write(mark);
  return DONE;
}
