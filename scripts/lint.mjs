// Style, purity (by the compiler: the core has no ambient types) and the order of the rooms.
import { roomProblems } from './rooms.mjs';
import { bin, run } from './run.mjs';

let failed = 0;
failed |= run(...bin('@biomejs/biome/bin/biome', ['check', '--config-path=scripts/lint.json', '.']));
failed |= run(...bin('typescript/bin/tsc', ['-b']));
const problems = roomProblems();
for (const problem of problems) console.error(problem);
console.log(problems.length === 0 ? 'rooms: in order' : `rooms: ${problems.length} problems`);
process.exit(failed || problems.length > 0 ? 1 : 0);
