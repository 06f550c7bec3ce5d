import { simcGains } from '../control/design-simc.ts';
import { scaledEstimate } from '../identify/estimate.ts';
import { fitStep, joinSteps } from '../identify/fit-step.ts';
import type { LoggedRun } from '../identify/read-log.ts';
import { checkSteps, stepRecordsOf } from '../identify/step-records.ts';
import type { StepTestFit } from '../identify/step-test.ts';
import type { Warning } from '../problems/warning.ts';
import { toKmhPerPct, toPct, toPctPerKmh } from '../units/convert.ts';
import type { StepDesign, StepIdentification } from './identification.ts';
import type { IdentifyRequest } from './identify-request.ts';
import type { InputLog } from './input-log.ts';
import { counted, logNames, numberWords } from './provenance.ts';
import { TOOL_VERSION } from './tool-version.ts';

/** Closed loops that are designed, in delays; the first is as tight as SIMC goes. */
const CLOSED_LOOPS = [
  { name: 'simc-tight', delays: 1 },
  { name: 'simc-calm', delays: 4 },
] as const;
/** Shortest closed loop that is written where there is next to no delay [s]. */
const SHORTEST = 0.1;
/** Ratio of the gains of steps up and down beyond which one linear loop is a poor picture. */
const UNLIKE = 1.25;
const WIDE = 0.25;

/** Gain, time constant and delay of throttle steps, and PI candidates designed from them. */
export function identifySteps(
  request: IdentifyRequest,
  logs: readonly LoggedRun[],
  log: InputLog,
): StepIdentification {
  const records = stepRecordsOf(logs);
  const fit = joinSteps(checkSteps(records, records.map(fitStep)));
  const designs = CLOSED_LOOPS.map(({ name, delays }) => designOf(fit, name, delays));
  return {
    kind: 'step',
    toolVersion: TOOL_VERSION,
    logs: logNames(request),
    inputs: log.files,
    given: [],
    warnings: stepWarnings(fit),
    fit,
    designs,
    text: candidatesText(request, fit, designs),
  };
}

function designOf({ all }: StepTestFit, name: string, delays: number): StepDesign {
  const lag = all.timeConstant.value;
  const delay = Math.max(0, all.delay.value);
  const closedLoop = Math.max(SHORTEST, delays * delay);
  const { kp, ki } = simcGains({ gain: all.gain.value / lag, lag, delay }, closedLoop, 'simc');
  return { name, closedLoop, kp, integralTime: kp / ki };
}

function stepWarnings({ steps, all, up, down }: StepTestFit): readonly Warning[] {
  const warnings: Warning[] = [];
  if (steps.length < 4)
    warnings.push({
      code: 'few-steps',
      message: `${counted(steps.length, 'step')}: two up and two down, at the speed and in the gear of the hold, show how far they scatter.`,
    });
  for (const [name, { value, low, high }] of [
    ['gain', all.gain],
    ['time constant', all.timeConstant],
    ['delay', all.delay],
  ] as const)
    if ((high - low) / 2 > WIDE * Math.abs(value))
      warnings.push({
        code: 'wide-interval',
        message: `The ${name} is known to ±${toPct((high - low) / 2 / Math.abs(value)).toFixed(0)} % only: more or larger steps make it better.`,
      });
  const ratio = up === null || down === null ? 1 : up.gain.value / down.gain.value;
  if (ratio > UNLIKE || ratio < 1 / UNLIKE)
    warnings.push({
      code: 'unlike-steps',
      message: `Steps up have ${ratio.toFixed(2)} times the gain of steps down: the throttle is not linear here. Design with the greater gain, or take smaller steps.`,
    });
  return warnings;
}

function candidatesText(request: IdentifyRequest, fit: StepTestFit, designs: readonly StepDesign[]): string {
  const { gain, timeConstant, delay } = fit.all;
  const words = numberWords(scaledEstimate(gain, toKmhPerPct(1)), 'km/h per %');
  return `# Candidates of a case, designed by ridgehold identify from ${counted(fit.steps.length, 'throttle step')} in ${logNames(request).join(', ')}:
# gain ${words}
# time constant ${numberWords(timeConstant, 's')}
# delay ${numberWords(delay, 's')}
# Gains by SIMC (S. Skogestad, J. Process Control 13 (2003) 291-309): Kc = T / (K (tc + L)), Ti = min(T, 4 (tc + L)).
# The controller's own sampling and computing delay are not in the step test: add them to L where they count.
candidates:
${designs
  .map(
    ({ name, kp, integralTime, closedLoop }) =>
      `  - {name: ${name}, kind: pi, kp_pct_per_kmh: ${Number(toPctPerKmh(kp).toPrecision(4))}, ti_s: ${Number(integralTime.toPrecision(4))}, setpoint_weight: 0, anti_windup: {kind: back_calculation, tracking_s: ${Number(integralTime.toPrecision(2))}}} # tc ${closedLoop.toPrecision(2)} s`,
  )
  .join('\n')}
`;
}
