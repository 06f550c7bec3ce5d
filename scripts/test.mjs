// The whole check on a bare machine: dependencies, a Chromium, lint, types, build, and every test.
import { accessSync, constants, existsSync, readFileSync, rmSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { bin, must, root, run } from './run.mjs';

function findChromium() {
  const set = process.env.CHROMIUM_PATH;
  const folders = (process.env.PATH ?? '').split(delimiter).filter(Boolean);
  const names = ['chromium', 'chromium-browser', 'google-chrome', 'google-chrome-stable'];
  for (const file of set ? [set] : names.flatMap((n) => folders.map((d) => join(d, n)))) {
    try {
      accessSync(file, constants.X_OK);
      return file;
    } catch {}
  }
  return undefined;
}

if (!existsSync(join(root, 'node_modules', 'vitest'))) must('npm', ['ci', '--no-audit', '--no-fund']);

let chromium = findChromium();
const apt = existsSync('/usr/bin/apt-get') && process.getuid?.() === 0 && !process.env.CHROMIUM_PATH;
if (!chromium && apt) {
  const env = { DEBIAN_FRONTEND: 'noninteractive' };
  const wait = ['-o', 'DPkg::Lock::Timeout=300'];
  run('apt-get', ['update', '-qq', ...wait], env);
  run(
    'apt-get',
    ['install', '-y', '-qq', '--no-install-recommends', ...wait, 'chromium', 'fonts-dejavu-core'],
    env,
  );
  chromium = findChromium();
}
if (!chromium) {
  const where = process.env.CHROMIUM_PATH ? `at CHROMIUM_PATH=${process.env.CHROMIUM_PATH}` : 'on PATH';
  console.error(`error: no Chromium found ${where}; the page tests need one.
Run "apt-get install chromium fonts-dejavu-core" as root, or set CHROMIUM_PATH.
"npm run build && npm run test:unit && npm run test:program" runs the rest without it.`);
  process.exit(1);
}

must('npm', ['run', '-s', 'lint']);
must('npm', ['run', '-s', 'build']);
const json = join('test-results', 'vitest.json');
rmSync(join(root, json), { force: true });
const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${json}`];
const status = run(
  ...bin('vitest/vitest.mjs', ['run', '--config', 'scripts/vitest.config.ts', ...reporters]),
  { CHROMIUM_PATH: chromium },
);
const result = existsSync(join(root, json)) ? JSON.parse(readFileSync(join(root, json), 'utf8')) : {};
const passed = result.numPassedTests ?? 0;
console.log(`${passed} passed, ${result.numFailedTests ?? 0} failed, ${result.numPendingTests ?? 0} skipped`);
process.exit(status === 0 && passed === 0 ? 1 : status);
