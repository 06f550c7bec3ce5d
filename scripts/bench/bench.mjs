// Speed as ratios within one run: `npm run bench`. CPU time, alternating rounds, medians. Times mean little on a
// shared machine; ratios hold. What is not installed is left out, and said.
import { spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { must, root } from '../run.mjs';
import { cpu } from './cpu.mjs';
import { benchKinds } from './kinds.mjs';
import { benchMatrix, cellsOfMatrix, runsOfMatrix } from './matrix.mjs';
import { benchBytes, benchPlan, benchRoad } from './scenario.mjs';
import { benchTune } from './tune.mjs';

if (process.argv[2] === undefined && !existsSync(join(root, 'dist/index.js')))
  must('npm', ['run', '-s', 'build']);
// Another build may be measured: `npm run bench -- FILE`.
const index = pathToFileURL(process.argv[2] ?? join(root, 'dist/index.js')).href;
const library = await import(index);
const folder = mkdtempSync(join(tmpdir(), 'ridgehold-bench-'));
const ROUNDS = 7;
const KM = 1000;

const median = (values) => [...values].sort((a, b) => a - b)[values.length >> 1];
const show = (label, value, note = '') => console.log(`${label.padEnd(66)} ${value} ${note}`.trimEnd());
const factor = (value) => `${value < 10 ? value.toFixed(2) : value.toFixed(0)} x`;

/** Mean CPU seconds of several calls, and what the last one gave. */
function cpuOf(task, calls) {
  const runs = Array.from({ length: calls }, () => cpu(task));
  return { seconds: runs.reduce((sum, { seconds }) => sum + seconds, 0) / calls, result: runs.at(-1).result };
}

function has(command, args) {
  const done = spawnSync(command, args, { stdio: 'ignore' });
  return !done.error && done.status === 0;
}

try {
  const road = benchRoad(100 * KM);
  const exact = () => library.runLoop(benchPlan(library, road, 'exact'));
  const fast = () => library.runLoop(benchPlan(library, road, 'fast'));
  for (let i = 0; i < 3; i++) {
    exact();
    fast();
  }

  console.log('One vehicle, 100 km, controller at 50 Hz; whole public call with its results\n');
  const table = join(folder, 'road.bin');
  writeFileSync(table, benchBytes(road));
  const program = join(folder, 'reference');
  const gcc =
    has('gcc', ['--version']) &&
    has('gcc', ['-O3', '-march=native', '-o', program, join(root, 'scripts/bench/reference.c'), '-lm']);
  if (!gcc) console.log('left out: the C reference (no gcc here)');

  const rounds = [];
  for (let i = 0; i < ROUNDS; i++) {
    const c = gcc ? JSON.parse(spawnSync(program, [table, '8'], { encoding: 'utf8' }).stdout) : null;
    // The C program runs eight times in a process of its own. Starting it marks every page of this process to be copied
    // at the next write, which one call of each scheme pays for before the clock runs.
    exact();
    fast();
    const e = cpuOf(exact, 4);
    const f = cpuOf(fast, 4);
    rounds.push({ c, e, f });
  }
  const nsPerTick = (seconds, result) => (seconds * 1e9) / (result.endTime / 0.02);
  const last = rounds.at(-1);
  if (gcc) {
    const ratios = rounds.map((r) => r.e.seconds / r.c.seconds);
    show(
      'default scheme / C, gcc -O3 -march=native, plain RK4',
      factor(median(ratios)),
      `(best ${factor(Math.min(...ratios))}; goal 1.25)`,
    );
    show('fast scheme / the same C', factor(median(rounds.map((r) => r.f.seconds / r.c.seconds))));
    const work = last.e.result.ledger.drive + last.e.result.ledger.regeneration;
    const gap = Math.abs(work / last.c.drive - 1);
    show('  they agree: drive work differs by', gap.toExponential(1), `relative; ${last.c.ticks} ticks`);
    if (!(gap < 1e-4))
      throw new Error(`the C reference and the library disagree: ${work} J, ${last.c.drive} J`);
  }
  show('fast / default scheme', factor(median(rounds.map((r) => r.f.seconds / r.e.seconds))), '(goal 0.6)');
  show('  default, ns a tick', nsPerTick(median(rounds.map((r) => r.e.seconds)), last.e.result).toFixed(0));

  console.log(
    '\n50 km of it, default scheme: vehicles of every kind / the plain force, each pair in two processes',
  );
  for (const { label } of benchKinds(library, benchPlan(library, road, 'exact'))) {
    const ratios = [0, 1].flatMap(() => {
      const program = fileURLToPath(new URL('kinds.mjs', import.meta.url));
      const child = spawnSync(process.execPath, [program, index, label], { encoding: 'utf8' });
      if (child.status !== 0) throw new Error(`the bench of ${label} failed: ${child.stderr}`);
      return JSON.parse(child.stdout);
    });
    const goal = label.startsWith('crosswind') ? 'no goal' : 'goal 1.5';
    show(`  ${label}`, factor(median(ratios)), `(best ${factor(Math.min(...ratios))}; ${goal})`);
  }
  console.log('');

  for (const [what, recovers, goal] of [
    ['', false, '(goal 1.1)'],
    [', a recovery among what is judged', true, ''],
  ]) {
    const work = benchMatrix(library, recovers);
    const ratios = [];
    for (let i = 0; i < ROUNDS; i++) {
      const runs = cpu(() => runsOfMatrix(library, work)).seconds;
      const cells = cpu(() => cellsOfMatrix(library, work)).seconds;
      if (i > 0) ratios.push(cells / runs);
    }
    show(`matrix of 24 combinations / its runs alone${what}`, factor(median(ratios)), goal);
  }

  const long = benchRoad(1000 * KM);
  const short = benchRoad(20 * KM);
  const perMetre = (r, plan) =>
    cpu(() => library.runLoop(benchPlan(library, r, plan))).seconds / r.distance[r.size - 1];
  const growth = [0, 1, 2].map(() => {
    const small = median([0, 1, 2, 3, 4].map(() => perMetre(short, 'exact')));
    return perMetre(long, 'exact') / small;
  });
  show('cost per metre, 1,000 km / 20 km', factor(median(growth)), '(goal 1.1)');

  if (has('python3', ['-c', 'import scipy'])) {
    const python = JSON.parse(
      spawnSync('python3', [join(root, 'scripts/bench/solver.py'), table, '1500'], {
        encoding: 'utf8',
        env: { ...process.env, OPENBLAS_NUM_THREADS: '1' },
      }).stdout,
    );
    const tick = median(rounds.map((r) => r.e.seconds)) / (last.e.result.endTime / 0.02);
    show('plain loop in a scripting language / default scheme', factor(python.loop / tick), '(goal 200)');
    show(
      'adaptive solver restarted at each sample / default scheme',
      factor(python.solver / tick),
      '(goal 3,000)',
    );
  } else console.log('left out: the general adaptive solver (no python3 with scipy here)');

  const points = 500_000;
  const rows = [];
  for (let i = 0; i < points; i++)
    rows.push(
      `<trkpt lat="${(40 + i * 9e-5).toFixed(7)}" lon="${(-30 + 0.01 * Math.sin(i / 500)).toFixed(7)}"><ele>${(200 + 50 * Math.sin(i / 300)).toFixed(2)}</ele></trkpt>`,
    );
  const gpx = join(folder, 'long.gpx');
  writeFileSync(
    gpx,
    `<?xml version="1.0"?><gpx version="1.1" xmlns="http://www.topografix.com/GPX/1/1"><trk><trkseg>${rows.join('\n')}</trkseg></trk></gpx>`,
  );
  const reader = spawnSync(process.execPath, [join(root, 'scripts/bench/read-points.mjs'), gpx], {
    encoding: 'utf8',
  });
  if (reader.status !== 0) throw new Error(`reading ${points} points failed: ${reader.stderr}`);
  const read = JSON.parse(reader.stdout);
  show(
    `reading ${read.points} GPX points`,
    `${read.seconds.toFixed(1)} s`,
    `${read.peakMb.toFixed(0)} MB at peak (goal 5 s, 1,000 MB)`,
  );

  const tuning = benchTune(library);
  show(
    `gains under a bound at ${tuning.points} operating points, one of them`,
    `${tuning.pointMs.toFixed(1)} ms`,
  );
  show(
    `tuning on 20 km of road in ${tuning.replays} replays`,
    `${tuning.roadSeconds.toFixed(1)} s`,
    `(${tuning.replayMs.toFixed(0)} ms a replay with its figures)`,
  );
} finally {
  rmSync(folder, { recursive: true, force: true });
}
