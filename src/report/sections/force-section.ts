import { forceSpeedChart } from '../charts/force-speed.ts';
import { html } from '../html.ts';
import { forceLines } from '../model/force-lines.ts';
import type { View } from '../model/view.ts';
import { fixed, forceText, powerText, withUnit } from '../quantity.ts';
import { chartFigure } from './chart-figure.ts';
import type { Section } from './section.ts';

/** 4: what the drive has against what grades ask. */
export function forceSection(view: View): Section {
  const { vehicle } = view.result;
  const { drive } = vehicle;
  const power = drive.peakPower === null ? '' : `, at most ${powerText(drive.peakPower)}`;
  const least =
    drive.throttleMin < 0
      ? `regeneration up to ${forceText(drive.regenerationForce)}`
      : `${forceText(drive.closedThrottleForce)} of drag at closed throttle`;
  const body = html`<p>${vehicle.name}: ${withUnit(fixed(vehicle.mass), 'kg')} with rider and load, ${forceText(drive.peakForce)} at full throttle${power}, ${least}.</p>
${chartFigure('force', (canvas) => forceSpeedChart(view, canvas), html`Shaded: what the drive can give. Thin lines: what steady speed asks on a grade in still air. Where a thin line leaves the shade at the set speed, that grade cannot be held.${forceLines(view).derated && ' Full throttle is drawn for the lowest and the highest place of the route: thin air takes force away.'}`)}`;
  return { id: 'force', number: 4, title: 'Force against speed', body };
}
