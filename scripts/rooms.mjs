// The order of the rooms of src/: a room imports only from rooms above it, type imports included.
// Also the words the core must not use, because their results differ between engines or hang on the host.
import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { root } from './run.mjs';

export const ROOMS = [
  'units',
  'problems',
  'numeric',
  'linear',
  'track',
  'road',
  'vehicle',
  'control',
  'loop',
  'study',
  'identify',
  'case',
  'run',
  'report',
  'cli',
  'workbench',
];

const FORBIDDEN = [
  [
    /\bMath\.(sin|cos|tan|asin|acos|atan|atan2|exp|expm1|log|log2|log10|log1p|pow|cbrt|sinh|cosh|tanh)\b/,
    'differs between engines: use numeric/',
  ],
  [/\*\*/, 'differs between engines: write the product out'],
  [/\bMath\.random\b/, 'use a seeded stream of numeric/'],
  [/\bDate\.now\b|new Date\(\)/, 'the core has no clock'],
  [/\btoLocale\w+\(/, 'depends on the host'],
  [/import\('[^']+'\)\.\w/, 'a type import hidden in an expression'],
  [/@ts-(ignore|nocheck|expect-error)/, 'untyped'],
];

/** Every .ts file below a folder, in name order. */
function files(folder) {
  return readdirSync(folder, { withFileTypes: true })
    .sort((a, b) => (a.name < b.name ? -1 : 1))
    .flatMap((entry) => {
      const path = join(folder, entry.name);
      if (entry.isDirectory()) return files(path);
      return entry.name.endsWith('.ts') ? [path] : [];
    });
}

/** Source text without comments (strings stay: a pattern in a string is rare and would be seen). */
function code(text) {
  return text
    .replace(/\/\*[\s\S]*?\*\//g, (c) => c.replace(/[^\n]/g, ' '))
    .replace(/(^|[^:'"`])\/\/[^\n]*/g, '$1');
}

/** All broken rules, a line each. */
export function roomProblems(folder = join(root, 'src')) {
  const problems = [];
  const graph = new Map();
  for (const path of files(folder)) {
    const here = relative(folder, path).split('\\').join('/');
    const room = here.includes('/') ? here.split('/')[0] : null;
    if (room !== null && !ROOMS.includes(room)) problems.push(`${here}: '${room}' is not a room`);
    const text = code(readFileSync(path, 'utf8'));
    const targets = [];
    for (const [, target] of text.matchAll(/(?:from|import)\s*\(?\s*['"]([^'"]+)['"]/g)) {
      if (target.startsWith('node:')) {
        if (room !== 'cli') problems.push(`${here}: imports ${target}; only cli may`);
        continue;
      }
      if (!target.startsWith('.')) continue;
      const to = relative(folder, resolve(dirname(path), target))
        .split('\\')
        .join('/');
      targets.push(to);
      const toRoom = to.split('/')[0];
      if (room !== null && to.startsWith('..')) {
        if (!to.endsWith('package.json')) problems.push(`${here}: imports ${target}, outside of src/`);
      } else if (room !== null && toRoom !== room && ROOMS.indexOf(toRoom) > ROOMS.indexOf(room))
        problems.push(`${here}: imports from ${toRoom}/, which stands below ${room}/`);
      if (room === 'workbench' && toRoom === 'cli') problems.push(`${here}: workbench imports cli`);
    }
    graph.set(here, targets);
    if (room === 'cli' || room === 'workbench') continue;
    text.split('\n').forEach((line, i) => {
      for (const [pattern, why] of FORBIDDEN)
        if (pattern.test(line)) problems.push(`${here}:${i + 1}: ${line.trim().slice(0, 60)} (${why})`);
    });
  }
  return [...problems, ...circles(graph)];
}

function circles(graph) {
  const state = new Map();
  const found = [];
  const visit = (node, trail) => {
    if (state.get(node) === 'done') return;
    if (state.get(node) === 'open') {
      found.push(`circle: ${[...trail.slice(trail.indexOf(node)), node].join(' -> ')}`);
      return;
    }
    state.set(node, 'open');
    for (const next of graph.get(node) ?? []) visit(next, [...trail, node]);
    state.set(node, 'done');
  };
  for (const node of graph.keys()) visit(node, []);
  return found;
}
