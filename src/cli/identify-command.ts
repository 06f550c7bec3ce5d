import { join } from 'node:path';
import { RIDE_UNKNOWNS, type RideUnknown } from '../identify/ride.ts';
import { InputError } from '../problems/input-error.ts';
import { identificationAnswer } from '../report/identify/identification-answer.ts';
import { identificationChartFiles } from '../report/identify/identification-chart-files.ts';
import { identificationJson } from '../report/identify/identification-json.ts';
import { renderIdentification } from '../report/identify/render-identification.ts';
import { identifyLogs } from '../run/identify-logs.ts';
import { readerOf } from './case-reader.ts';
import type { Invocation } from './commands.ts';
import { defaultFolder } from './default-folder.ts';
import { DONE } from './exit-status.ts';
import { numberOption } from './number-option.ts';
import { pictureFiles } from './picture-files.ts';
import { pngRenderer, pngWidthOf } from './png-renderer.ts';
import { readBytes } from './read-files.ts';
import { checkFolder, type ResultFile, writeResult } from './result-folder.ts';
import { say, tellWarnings } from './tell.ts';
import { targetOf } from './vehicle-target.ts';

const PAGE = 'identify.html';
const MARK = 'identify.json';

/** `ridgehold identify LOG...`: logs become numbers of a vehicle, its file, and a page that says how good they are. */
export async function identifyCommand({ operands, values }: Invocation<'identify'>): Promise<number> {
  const width = pngWidthOf(values);
  const ofCase = values.case === undefined ? null : readerOf(values.case);
  const work = () =>
    identifyLogs({
      logs: operands,
      read: (file) => readBytes(file),
      kind: values.kind,
      vehicle: values.vehicle,
      case: ofCase ?? undefined,
      fit: unknownsOf(values.fit),
      massKg: numberOption(values['mass-kg'], { name: 'mass-kg', unit: 'kg', least: 20, most: 5000 }),
      rotatingKg: numberOption(values['rotating-kg'], {
        name: 'rotating-kg',
        unit: 'kg',
        least: 0,
        most: 300,
      }),
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
  const result = ofCase === null ? work() : ofCase.telling(work);
  const fallback = join(
    defaultFolder(operands[0]),
    result.kind === 'step' ? 'candidates.yaml' : 'vehicle.yaml',
  );
  const { folder, name } = targetOf(values.out ?? fallback, MARK);
  checkFolder(folder, [PAGE, MARK]);
  const units = values.units ?? 'kmh';
  const draw = width === null ? null : await pngRenderer(width);
  const files: readonly ResultFile[] = [
    { name: PAGE, text: renderIdentification(result, { units, output: name }) },
    ...pictureFiles(identificationChartFiles(result, { units }), draw),
  ];
  const mark = identificationJson(
    result,
    name,
    files.map((file) => file.name),
  );
  writeResult(folder, [{ name, text: result.text }, ...files, { name: MARK, text: mark }], [name]);
  if (!values.quiet) {
    say(identificationAnswer(result).sentence);
    tellWarnings(result.warnings, (place) => place);
    say(
      `The ${result.kind === 'step' ? 'candidates are' : 'vehicle is'} at ${join(folder, name)}, how good the numbers are at ${join(folder, PAGE)}`,
    );
  }
  if (values.json) process.stdout.write(mark);
  return DONE;
}

/** Names of numbers to fit, as typed. */
function unknownsOf(text: string | undefined): readonly RideUnknown[] | undefined {
  const names = text?.split(',').map((name) => name.trim());
  const known = names?.flatMap((name) => RIDE_UNKNOWNS.filter((one) => one === name));
  if (known?.length === names?.length && new Set(known).size === known?.length) return known;
  if (text === undefined) return undefined;
  throw new InputError({
    code: 'option-value',
    place: {},
    message: `--fit cannot be '${text}'`,
    allowed: `one or more of ${RIDE_UNKNOWNS.join(', ')}, each once, with commas between`,
  });
}
