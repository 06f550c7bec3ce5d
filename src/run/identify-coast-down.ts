import { identifiedWarnings, newIdentifiedVehicle, withIdentified } from '../case/identified-vehicle.ts';
import type { VehicleDocument } from '../case/read-vehicle-file.ts';
import { checkCoastDown } from '../identify/check-fit.ts';
import { coastRunsOf } from '../identify/coast-runs.ts';
import { isTold } from '../identify/estimate.ts';
import { fitCoastDown } from '../identify/fit-coast-down.ts';
import type { LoggedRun } from '../identify/read-log.ts';
import { formAtReference, measuredForm } from '../identify/reference-conditions.ts';
import { coastDownWarnings } from './coast-down-warnings.ts';
import type { CoastDownIdentification } from './identification.ts';
import type { IdentifyRequest } from './identify-request.ts';
import type { InputLog } from './input-log.ts';
import { airOf, massesOf } from './known-quantities.ts';
import { counted, logNames, numberWords } from './provenance.ts';
import { TOOL_VERSION } from './tool-version.ts';

/** Drag area and rolling coefficient of coast-downs, put into a vehicle file. */
export function identifyCoastDown(
  request: IdentifyRequest,
  logs: readonly LoggedRun[],
  vehicle: VehicleDocument | null,
  log: InputLog,
): CoastDownIdentification {
  const masses = massesOf(request, vehicle);
  const air = airOf(request);
  const runs = coastRunsOf(logs);
  const fit = checkCoastDown(
    fitCoastDown(runs, {
      mass: masses.mass.value,
      rotatingMass: masses.rotating.value,
      airDensity: air.air.density,
    }),
    request.logs.join(', '),
  );
  const measured = measuredForm(fit, fit.setting);
  const { threeTerms } = fit;
  const three =
    threeTerms !== null && isTold(threeTerms.growth) ? measuredForm(threeTerms, fit.setting) : null;
  const provenance = [
    `Measured by ridgehold identify from ${counted(fit.runs.length, 'coast-down run')} in ${logNames(request).join(', ')}:`,
    `cda_m2 ${numberWords(fit.cda, 'm2')}`,
    `crr ${numberWords(fit.crr, '')}`,
    `correlation ${fit.correlation.toFixed(2)}; air ${air.air.density.toFixed(3)} kg/m3 (${air.words}), loaded mass ${masses.mass.value} kg (${masses.mass.from})`,
    ...(vehicle === null ? [] : [`everything else is as in ${vehicle.source.file.split(/[\\/]/).at(-1)}`]),
  ];
  const found = { cda: fit.cda.value, crr: fit.crr.value, growth: { c1: 0, c2: 0 }, mass: null, provenance };
  return {
    kind: 'coast-down',
    toolVersion: TOOL_VERSION,
    logs: logNames(request),
    inputs: log.files,
    given: [masses.mass, masses.rotating, ...air.given],
    warnings: [
      ...coastDownWarnings(fit, logs, air.assumed),
      ...(vehicle === null ? [] : identifiedWarnings(vehicle, found)),
    ],
    fit,
    air: air.air,
    measured,
    atReference: formAtReference(measured, air.air),
    withThreeTerms: three === null ? null : { measured: three, atReference: formAtReference(three, air.air) },
    text:
      vehicle === null
        ? newIdentifiedVehicle({
            cda: fit.cda.value,
            crr: fit.crr.value,
            mass: masses.mass.value,
            rotatingMass: masses.rotating.value,
            provenance,
            massWords: `Given: ${masses.mass.value} kg loaded (${masses.mass.from}); what turns with the wheels counts for ${masses.rotating.value} kg more (${masses.rotating.from}).`,
          })
        : withIdentified(vehicle, found),
  };
}
