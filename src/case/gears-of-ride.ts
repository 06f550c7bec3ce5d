import type { Problem } from '../problems/input-error.ts';
import type { CaseDocument } from './read-case-file.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import { type Path, placeOf } from './yaml-source.ts';

/** Problems with the gears that a case asks for: the gear at the start, and the rider's plan of shifts. */
export function gearsOfRide({ source, file }: CaseDocument, vehicle: VehicleDocument): Problem[] {
  const { gear, shifts } = file.hold;
  const { drive } = vehicle.file;
  const problem = (path: Path, code: string, message: string, found: string, allowed: string): Problem => ({
    code,
    place: placeOf(source, path),
    message,
    found,
    allowed,
  });
  const what = drive === undefined ? 'no drive' : `kind: ${drive.kind}`;
  if (drive?.kind !== 'engine')
    return [
      ...(gear === undefined
        ? []
        : [problem(['hold', 'gear'], 'no-gears', 'the drive has no gears', what, 'kind: engine')]),
      ...(shifts.length === 0
        ? []
        : [problem(['hold', 'shifts'], 'no-gears', 'the drive has no gears', what, 'kind: engine')]),
    ];

  const count = drive.gear_ratios.length;
  const unknown = (path: Path, found: number): Problem[] =>
    found <= count
      ? []
      : [
          problem(
            path,
            'out-of-range',
            `is no gear of ${vehicle.source.file}`,
            `${found}`,
            `a gear from 1 to ${count}`,
          ),
        ];
  const problems = gear === undefined ? [] : unknown(['hold', 'gear'], gear);
  if (shifts.length > 0 && drive.gearbox.kind !== 'clutch')
    problems.push(
      problem(
        ['hold', 'shifts'],
        'no-clutch',
        'the rider does not shift this gearbox',
        `gearbox: {kind: ${drive.gearbox.kind}}`,
        'kind: clutch',
      ),
    );
  let engaged = gear ?? drive.gear ?? count;
  shifts.forEach((shift, i) => {
    const path = ['hold', 'shifts', i, 'gear'];
    problems.push(...unknown(path, shift.gear));
    if (shift.gear === engaged)
      problems.push(
        problem(path, 'gear-engaged-already', 'is engaged already', `${shift.gear}`, 'another gear'),
      );
    engaged = shift.gear;
  });
  return problems;
}
