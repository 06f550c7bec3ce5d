// The demo: replays the invented route over Harrow Gap. A requirement that is not met is part of its story, not a failure.
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { must, root, run } from './run.mjs';

if (!existsSync(join(root, 'dist/cli.js'))) must('npm', ['run', '-s', 'build']);
const REQUIREMENT_NOT_MET = 1;
const status = run(process.execPath, [
  'dist/cli.js',
  'run',
  'routes/harrow-gap.yaml',
  '-o',
  'out/harrow-gap',
]);
if (status !== 0 && status !== REQUIREMENT_NOT_MET) process.exit(status);
for (const file of ['report.html', 'summary.json'])
  if (!existsSync(join(root, 'out/harrow-gap', file))) {
    console.error(`error: out/harrow-gap/${file} was not written`);
    process.exit(1);
  }
console.log('The report is at out/harrow-gap/report.html: open it in any browser.');
