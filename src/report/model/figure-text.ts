import { figureRow } from '../../study/figure-table.ts';
import type { Figure } from '../../study/findings.ts';
import { isNone } from '../../study/findings.ts';
import { fromKmh } from '../../units/convert.ts';
import {
  digitsFor,
  fixed,
  fixedApart,
  NO_VALUE,
  type SpeedUnit,
  signed,
  timeText,
  withUnit,
} from '../quantity.ts';

/** Value of the table of figures in the reader's unit, with that unit's name. */
export function readable(value: number, unit: string, speed: SpeedUnit): { value: number; unit: string } {
  if (unit === 'km/h') return { value: speed.of(fromKmh(value)), unit: speed.name };
  // Integrals of the error: its unit stands at the start of theirs, once or squared.
  if (unit.startsWith('km/h·'))
    return { value: speed.of(fromKmh(value)), unit: unit.replace('km/h', speed.name) };
  if (unit.startsWith('(km/h)²'))
    return {
      value: speed.of(fromKmh(speed.of(fromKmh(value)))),
      unit: unit.replace('(km/h)²', speed.axis.startsWith('(') ? '(km/h)²' : `${speed.name}²`),
    };
  if (isCount(unit)) return { value, unit: Math.abs(value) === 1 ? unit.slice(0, -1) : unit };
  return { value, unit: unit === '1' ? '' : unit };
}

const isCount = (unit: string): boolean => unit === 'events' || unit === 'shifts';

/** Digits after the point that such a figure supports; more where fewer would make 100 % of a little less. */
function digitsOf(value: number, unit: string): number {
  if (unit === '%') return value < 100 && value >= 99.95 ? (value >= 99.995 ? 3 : 2) : 1;
  if (unit === 'km/h') return 1;
  if (unit === 's') return Math.abs(value) < 9.95 ? 1 : 0;
  // A spread of counts is no whole number.
  if (isCount(unit) && Number.isInteger(value)) return 0;
  return digitsFor(value, 3);
}

/** A figure for people: rounded, with its unit; a figure that does not exist is a dash. */
export function figureText(figure: Figure | undefined, unit: string, speed: SpeedUnit): string {
  if (figure === undefined || isNone(figure)) return NO_VALUE;
  if (unit === 's' && figure >= 120) return timeText(figure);
  if (unit === '1') return figure === 0 ? '0' : scientific(figure);
  const shown = readable(figure, unit, speed);
  return withUnit(fixed(shown.value, digitsOf(shown.value, unit)), shown.unit);
}

/** As `figureText`, with as many digits more as tell the figure from the limits it is held against. */
export function figureTextBeside(
  figure: Figure,
  limits: readonly number[],
  unit: string,
  speed: SpeedUnit,
): string {
  if (isNone(figure) || unit === '1' || (unit === 's' && figure >= 120))
    return figureText(figure, unit, speed);
  const shown = readable(figure, unit, speed);
  const others = limits.map((limit) => readable(limit, unit, speed).value);
  return withUnit(fixedApart(shown.value, others, digitsOf(shown.value, unit)), shown.unit);
}

/** A small ratio as `2 × 10⁻⁹`. */
export function scientific(value: number): string {
  const [mantissa, exponent] = value.toExponential(0).split('e') as [string, string];
  const raised = exponent.replace(/[+\-0-9]/g, (c) =>
    c === '+' ? '' : c === '-' ? '⁻' : '⁰¹²³⁴⁵⁶⁷⁸⁹'[Number(c)]!,
  );
  return raised === '0' || raised === '⁰'
    ? mantissa.replace('-', '\u2212')
    : `${mantissa.replace('-', '\u2212')}\u00a0×\u00a010${raised}`;
}

/** A margin with its sign; with more digits where fewer would show a miss as nothing. Between two shares it is points of a per cent. */
export function marginText(margin: Figure, unit: string, speed: SpeedUnit): string {
  if (isNone(margin)) return NO_VALUE;
  const shown = readable(margin, unit, speed);
  let digits = digitsOf(shown.value, unit);
  while (digits < 4 && shown.value !== 0 && !/[1-9]/.test(fixed(shown.value, digits))) digits++;
  return withUnit(signed(shown.value, digits), shown.unit === '%' ? 'points' : shown.unit);
}

/** Name and unit of a figure for people; the figure's own name where the table does not have it. */
export function figureLabel(name: string): { label: string; unit: string } {
  const row = figureRow(name);
  return row === undefined ? { label: name, unit: '' } : { label: row.label, unit: row.unit };
}
