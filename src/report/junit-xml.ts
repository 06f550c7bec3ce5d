import type { RunResult } from '../run/run-result.ts';
import { isNone, type RequirementFinding } from '../study/findings.ts';
import { type Html, html } from './html.ts';
import { figureLabel, figureText, marginText } from './model/figure-text.ts';
import { combinationText } from './model/matrix-words.ts';
import { inReaderUnit } from './model/reader-unit.ts';
import { bandText, placeText, SPEED_UNITS, type SpeedUnit, type Units } from './quantity.ts';
import { whereWords } from './sections/answer-section.ts';

/** How a verdict stands in the file: what makes the run end with status 1 is red in a build, and nothing else is. */
type Outcome = 'passed' | 'failure' | 'error' | 'skipped';
const OUTCOMES: Readonly<Record<RequirementFinding['verdict'], Outcome>> = {
  met: 'passed',
  'not met': 'failure',
  'not judged': 'error',
  'too close to call': 'skipped',
};

/** A requirement's verdict, in the case itself or in a combination of its matrix. */
interface Judged {
  readonly finding: RequirementFinding;
  /** The combination in words; null: the case itself. */
  readonly combination: string | null;
}

/** What every JUnit file of this program begins with: by it a later run knows its own file. */
export const JUNIT_HEAD = '<?xml version="1.0" encoding="UTF-8"?>\n<testsuites name="ridgehold: ';

/**
 * The requirements as JUnit XML, for build servers: one test suite a candidate that is judged, in the order of the
 * case, and one test case a requirement; behind them one a requirement and combination of the matrix, but for the
 * combination that is the case itself. Elements and attributes are those that the widely used schema has (from
 * memory); no times are given, so that the same inputs give the same bytes.
 *
 * `met` passes; `not met` is a failure with measured value, limit, margin and place; `not judged` is an error with
 * its reason, because it counts as not met; `too close to call` is skipped with its words, because it does not.
 *
 * @param units of speeds in the words
 */
export function junitXml(run: RunResult, units: Units): string {
  const speed = SPEED_UNITS[units];
  const all = judgedIn(run, speed);
  const suites = run.candidates
    .map(({ name }) => ({ name, judged: all.filter(({ finding }) => finding.candidate === name) }))
    .filter(({ judged }) => judged.length > 0);
  const body = html`${run.title}"${counts(all)}>
${suites.map(({ name, judged }) => suite(run, name, judged, speed))}</testsuites>
`;
  return `${JUNIT_HEAD}${body}`;
}

/** Every verdict: of the case itself, then of each combination. */
function judgedIn({ requirements, matrix }: RunResult, speed: SpeedUnit): readonly Judged[] {
  const own = requirements.map((finding): Judged => ({ finding, combination: null }));
  if (matrix === null) return own;
  const others = matrix.cells.filter((cell) => !cell.own);
  return [
    ...own,
    ...others.flatMap((cell) => {
      const combination = combinationText(cell, matrix.lists, speed);
      return cell.findings.map((finding): Judged => ({ finding, combination }));
    }),
  ];
}

const countOf = (judged: readonly Judged[], outcome: Outcome): number =>
  judged.filter(({ finding }) => OUTCOMES[finding.verdict] === outcome).length;

/** Attributes that both levels have. */
function counts(judged: readonly Judged[]): Html {
  const count = (outcome: Outcome) => countOf(judged, outcome);
  return html` tests="${judged.length}" failures="${count('failure')}" errors="${count('error')}"`;
}

function suite(run: RunResult, name: string, judged: readonly Judged[], speed: SpeedUnit): Html {
  const properties = [
    ['case', run.caseName],
    ['tool', `ridgehold ${run.toolVersion}`],
    ['vehicle', run.vehicle.name],
    ['road', run.road.name],
    ...run.overrides.map((override) => ['override', override] as const),
    ...run.inputs.map((input) => [`sha256 ${input.name}`, input.sha256] as const),
  ] as const;
  return html`  <testsuite name="${name}"${counts(judged)} skipped="${countOf(judged, 'skipped')}">
    <properties>
${properties.map(([key, value]) => html`      <property name="${key}" value="${value}"/>\n`)}    </properties>
${judged.map((one) => testCase(run, one, speed))}  </testsuite>
`;
}

function testCase(run: RunResult, { finding, combination }: Judged, speed: SpeedUnit): Html {
  const { requirement, candidate, verdict } = finding;
  const { label } = figureLabel(requirement.figure);
  const band = requirement.band === null ? '' : ` ${bandText(requirement.band, speed)}`;
  const head = html`    <testcase classname="${`${run.caseName}.${candidate}`}" name="${`${requirement.id} ${label}${band}, ${whereWords(requirement)}${combination === null ? '' : `; ${combination}`}`}"`;
  const outcome = OUTCOMES[verdict];
  if (outcome === 'passed') return html`${head}/>\n`;
  const message = `${verdict}: ${messageOf(finding, speed)}`;
  const inner =
    outcome === 'skipped'
      ? html`<skipped message="${message}"/>`
      : outcome === 'error'
        ? html`<error type="${verdict}" message="${message}">${inReaderUnit(finding.words, speed)}</error>`
        : html`<failure type="${verdict}" message="${message}">${inReaderUnit(finding.words, speed)}</failure>`;
  return html`${head}>
      ${inner}
    </testcase>
`;
}

/** Measured value, limit, margin, place; or why there is none. */
function messageOf(finding: RequirementFinding, speed: SpeedUnit): string {
  const { requirement, measured, margin, worstAt, afterHill } = finding;
  const { unit } = figureLabel(requirement.figure);
  const { atLeast, atMost } = requirement;
  const limits = [
    ...(atLeast === null ? [] : [`at least ${figureText(atLeast, unit, speed)}`]),
    ...(atMost === null ? [] : [`at most ${figureText(atMost, unit, speed)}`]),
  ].join(' and ');
  const value = isNone(measured) ? measured.none : `measured ${figureText(measured, unit, speed)}`;
  const distance = isNone(margin)
    ? isNone(measured)
      ? ''
      : `, ${margin.none}`
    : `, margin ${marginText(margin, unit, speed)}`;
  const worst = afterHill === undefined ? `at ${placeText(worstAt ?? 0)}` : `after hill ${afterHill}`;
  const place = worstAt === null || isNone(measured) ? '' : `, worst ${worst}`;
  return `${value}, asked ${limits}${distance}${place}`;
}
