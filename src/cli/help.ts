import { COMMANDS, type CommandName, OPTIONS, type OptionName } from './commands.ts';

const WIDTH = 96;

/** Words broken into lines, each behind an indent. */
function wrap(text: string, indent: number): string {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    if (line !== '' && indent + line.length + 1 + word.length > WIDTH) {
      lines.push(line);
      line = '';
    }
    line += (line === '' ? '' : ' ') + word;
  }
  lines.push(line);
  return lines.map((each) => ' '.repeat(indent) + each).join('\n');
}

/** Two columns: what to type, and what it does. */
function columns(rows: readonly (readonly [string, string])[]): string {
  const left = Math.max(...rows.map(([term]) => term.length)) + 4;
  return rows.map(([term, about]) => `  ${term}${wrap(about, left).slice(2 + term.length)}`).join('\n');
}

function optionRow(name: OptionName): readonly [string, string] {
  const option = OPTIONS[name];
  const short = 'short' in option ? `-${option.short}, ` : '    ';
  const value = 'value' in option ? ` ${option.value}` : '';
  return [`${short}--${name}${value}`, option.about];
}

/** Help on the program: what there is. */
export function programHelp(): string {
  const names = Object.keys(COMMANDS) as CommandName[];
  return `Usage: ridgehold COMMAND ...

${wrap('Replays a planned road against a speed-hold design for motorcycles, scooters and other light vehicles: where it holds its set speed, where it cannot, and why.', 0)}

Commands:
${columns(names.map((name) => [[name, ...COMMANDS[name].operands].join(' '), COMMANDS[name].about] as const))}

Options:
${columns([
  ['-h, --help', 'print this help; after a command, the help of that command'],
  ['-V, --version', 'print the version'],
])}

${wrap('A simulation is no approval to ride: local rules and the judgement of qualified people come first.', 0)}
`;
}

/** Help on one command. */
export function commandHelp(name: CommandName): string {
  const { operands, about, details, options, example } = COMMANDS[name];
  return `Usage: ridgehold ${[name, ...operands].join(' ')} [options]

${wrap(`${about[0]?.toUpperCase()}${about.slice(1)}.`, 0)}

${details.map((paragraph) => wrap(paragraph, 0)).join('\n\n')}

Options:
${columns(options.map(optionRow))}

Example:
  ${example}
`;
}
