// The built program called many times in one process: what stands on standard input is a list of command lines, what
// goes to standard output is how each ended. The start of Node and the loading of the parsers are paid for once.
import { readFileSync } from 'node:fs';
import { pathToFileURL } from 'node:url';

const program = pathToFileURL(process.argv[2]).href;
const lines = JSON.parse(readFileSync(0, 'utf8'));
const write = process.stdout.write.bind(process.stdout);
// Every call adds its own listener.
process.stdout.setMaxListeners(0);
const told = [];
for (const [i, args] of lines.entries()) {
  const ended = { status: null, stdout: '', stderr: '' };
  for (const stream of ['stdout', 'stderr'])
    process[stream].write = (text) => {
      ended[stream] += text;
      return true;
    };
  process.argv = [process.argv[0], program, ...args];
  process.exitCode = undefined;
  // Another query is another module: only the first file of the program runs again.
  await import(`${program}?call=${i}`);
  ended.status = process.exitCode;
  told.push(ended);
}
process.exitCode = 0;
write(JSON.stringify(told));
