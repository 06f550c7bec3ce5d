import { candidateOf } from '../case/candidates-of.ts';
import type { CaseDocument } from '../case/read-case-file.ts';
import { roadOptionsOf, trackChoiceOf } from '../case/road-of.ts';
import { segmentsOf, titleOf } from '../case/run-of.ts';
import type { Candidate } from '../control/setup.ts';
import type { LoopPlan } from '../loop/plan.ts';
import { runLoop } from '../loop/run-loop.ts';
import type { Road } from '../road/road.ts';
import { askedHold } from '../study/asked-hold.ts';
import { demandOf } from '../study/demand.ts';
import type { Demand, FigureValues, Replayed, RequirementFinding } from '../study/findings.ts';
import { judge } from '../study/judge.ts';
import { figureValues } from '../study/measure-figure.ts';
import { readTrack } from '../track/read-track.ts';
import type { Track } from '../track/track.ts';
import { caseNameOf } from './case-name.ts';
import { checkSize } from './check-size.ts';
import { InputLog, type Reader } from './input-log.ts';
import { loopOfRun } from './loop-of-run.ts';
import { type Makers, prepareRun } from './prepare-run.ts';
import type { CandidateResult, RunResult } from './run-result.ts';
import { SCHEMA_VERSION, TOOL_VERSION } from './tool-version.ts';

export interface QuickRequest {
  /** Name of the case. */
  readonly file: string;
  /** Gives the same array for the same bytes, so that a track is known again. */
  readonly read: Reader;
}

/** Figures that need the hills of a road: only the whole run has them. */
const OF_HILLS = ['recovery_s', 'itae_kmh_s2', 'steady_hill_error_kmh'] as const;
const FOLLOWS = { none: 'it follows with the whole run' };
/** Runs of candidates that are kept: some cases' worth, so that a step back costs nothing. */
const MOST_RUNS = 24;
/** Roads and tracks that are kept. */
const MOST_ROADS = 4;

interface KeptRun extends Omit<CandidateResult, keyof Candidate> {
  readonly plan: LoopPlan;
}

/**
 * The runs of a case alone, for a hand that moves a number: every candidate replayed as `runCase` replays it, its figures
 * bit for bit those of the whole run. What a change does not touch is kept: the track, the road, the demand, the runs of
 * the other candidates.
 *
 * Left to the whole run are hills with what hangs on them, limit cycles, segments, the spread of the figures and so
 * `too close to call`, logged rides, the loop at operating points, warnings, and the matrix.
 */
export class QuickRuns {
  private readonly tracks = new Kept<Track>(MOST_ROADS);
  private readonly roads = new Kept<Road>(MOST_ROADS);
  private readonly candidates = new Kept<Candidate>(MOST_RUNS);
  private readonly demands = new Kept<Demand>(MOST_ROADS);
  private readonly runs = new Kept<KeptRun>(MOST_RUNS);
  private readonly names = new WeakMap<Uint8Array, number>();
  private named = 0;

  /**
   * Yields before each candidate, so that whoever runs it can leave it for a newer request.
   *
   * @throws InputError as `runCase`
   */
  *run({ file, read }: QuickRequest): Generator<void, RunResult> {
    const log = new InputLog(read);
    const prepared = prepareRun({ file, log, makers: this.makersOf(read) });
    const { document, vehicle, road, ride, requirements, band, plans, candidates } = prepared;
    checkSize(document, plans, { ...prepared.output, series: 'bins' }, segmentsOf(document));
    const { hold, rider, supervisor = null, faults = [] } = ride;
    const setting = this.settingOf(document, read);
    const demand = this.demands.get(setting, () =>
      demandOf(road, vehicle, askedHold(hold, rider, supervisor ?? {}, vehicle), rider),
    );
    const replayed: Replayed[] = [];
    const results: CandidateResult[] = [];
    const context = { road, demand, hills: [] };
    for (const [i, plan] of plans.entries()) {
      yield;
      const candidate = candidates[i] as Candidate;
      const kept = this.runs.get(setting + controllerKey(document, i), () => {
        const result = runLoop({ ...plan, detail: true });
        const figures = figureValues({ name: candidate.name, plan, result }, context, 'all', band);
        const loop = loopOfRun(document, vehicle, hold, candidate, result);
        return { plan, result, figures: withoutHills(figures), loop, full: null };
      });
      const { plan: run, ...found } = kept;
      replayed.push({ name: candidate.name, plan: run, result: kept.result });
      results.push({ ...candidate, ...found });
    }
    yield;
    const judged = requirements.filter(({ figure }) => !OF_HILLS.some((name) => name === figure));
    const findings = judge(judged, replayed, context, { roads: 0, seed: 0, rows: [] });
    return {
      schemaVersion: SCHEMA_VERSION,
      toolVersion: TOOL_VERSION,
      title: titleOf(document) ?? caseNameOf(file),
      caseName: caseNameOf(file),
      inputs: log.files,
      overrides: [],
      road,
      vehicle,
      hold,
      rider,
      supervisor,
      faults,
      bends: prepared.bends,
      scheme: prepared.scheme,
      band,
      candidates: results,
      demand,
      hills: [],
      cycles: [],
      transients: { shown: [], measures: [], leftOut: [] },
      loggedRides: [],
      loops: { points: [], notHeld: [], loops: [] },
      segmentsBy: segmentsOf(document).by,
      segments: [],
      requirements: findings,
      spread: { roads: 0, seed: 0, words: '' },
      defaults: [],
      given: [],
      warnings: prepared.warnings,
      matrix: null,
      status: findings.some(isNotMet) ? 'requirement_not_met' : 'ok',
    };
  }

  /** What the preparation of a run is spared. */
  private makersOf(read: Reader): Makers {
    return {
      track: (input, choice) => {
        const key = JSON.stringify([this.nameOf(input.bytes), input.name, choice ?? null]);
        return this.tracks.get(key, () => readTrack(input, choice));
      },
      road: (document, make) => {
        const key = roadKey(document, this.trackOf(document, read));
        return this.roads.get(key, () => make(document));
      },
      candidate: (file, context) => {
        const key = this.settingOf(context.document, read) + controllerKey(context.document, context.index);
        const { controller } = this.candidates.get(key, () => candidateOf(file, context));
        return { name: file.name ?? file.kind, controller };
      },
    };
  }

  /** A number for the bytes of a file. */
  private nameOf(bytes: Uint8Array): number {
    const name = this.names.get(bytes) ?? ++this.named;
    this.names.set(bytes, name);
    return name;
  }

  /** All that runs depend on beside their controllers: the texts, but for what only names or judges. */
  private settingOf({ source, vehicleFile, trackFile }: CaseDocument, read: Reader): string {
    const files = [vehicleFile, trackFile].map((name) => (name === null ? null : this.nameOf(read(name))));
    return JSON.stringify([files, { ...(source.value as object), candidates: null, title: null }]);
  }

  private trackOf({ trackFile }: CaseDocument, read: Reader): number | null {
    return trackFile === null ? null : this.nameOf(read(trackFile));
  }
}

/** The controller of a candidate, by whatever name. */
const controllerKey = ({ file }: CaseDocument, index: number): string =>
  JSON.stringify({ ...file.candidates[index], name: null });

/** All that a road is made of; a track does not use the set speed. */
function roadKey(document: CaseDocument, track: number | null): string {
  const options = roadOptionsOf(document);
  const written = track === null ? document.file.track : null;
  return JSON.stringify([
    track,
    trackChoiceOf(document),
    written,
    track === null ? options : { ...options, nominalSpeed: 0 },
    document.trackFile,
  ]);
}

const isNotMet = ({ verdict }: RequirementFinding): boolean => verdict === 'not met';

function withoutHills(figures: FigureValues): FigureValues {
  return { ...figures, ...Object.fromEntries(OF_HILLS.map((name) => [name, FOLLOWS])) };
}

/** What was made last, by what it was made of. */
class Kept<T> {
  private readonly made = new Map<string, T>();
  private readonly most: number;

  constructor(most: number) {
    this.most = most;
  }

  get(key: string, make: () => T): T {
    const found = this.made.get(key);
    const value = found ?? make();
    this.made.delete(key);
    this.made.set(key, value);
    for (const oldest of this.made.keys()) {
      if (this.made.size <= this.most) break;
      this.made.delete(oldest);
    }
    return value;
  }
}
