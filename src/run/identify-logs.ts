import { readVehicleFile } from '../case/read-vehicle-file.ts';
import { logKindOf } from '../identify/log-kind.ts';
import { readLog } from '../identify/read-log.ts';
import { decodeText } from '../track/decode-text.ts';
import type { Identification } from './identification.ts';
import { identifyCoastDown } from './identify-coast-down.ts';
import type { IdentifyRequest } from './identify-request.ts';
import { identifyRide } from './identify-ride.ts';
import { identifySteps } from './identify-steps.ts';
import { InputLog } from './input-log.ts';
import { refuseUnused } from './refuse-unused.ts';

/**
 * Turns logs into numbers of a vehicle: text in, plain data out.
 *
 * @throws InputError `option-without-use`; for what a log or the vehicle file refuses, and for logs that are too thin, with what was found
 *   and what to measure
 */
export function identifyLogs(request: IdentifyRequest): Identification {
  const log = new InputLog(request.read);
  const { logs, vehicle: name } = request;
  // Along the road of a case a ride may have places alone: another reader.
  if (request.case !== undefined && (request.kind ?? 'ride') === 'ride') {
    refuseUnused(request, 'ride');
    return identifyRide(request, null, log);
  }
  const runs = logs.flatMap((file) => readLog(decodeText(log.read(file), file), file));
  const kind = request.kind ?? logKindOf(runs);
  refuseUnused(request, kind);
  if (kind === 'ride') return identifyRide(request, runs, log);
  const vehicle = name === undefined ? null : readVehicleFile(decodeText(log.read(name), name), name);
  return kind === 'step' ? identifySteps(request, runs, log) : identifyCoastDown(request, runs, vehicle, log);
}
