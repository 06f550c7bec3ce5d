import { type ParseArgsConfig, parseArgs } from 'node:util';
import { InputError } from '../problems/input-error.ts';
import { COMMANDS, type CommandName, type Invocation, isCommand, OPTIONS } from './commands.ts';

/** What the user asked for. */
export type Request =
  | { readonly kind: 'version' }
  | { readonly kind: 'help'; readonly command: CommandName | null }
  | { readonly kind: 'command'; readonly invocation: Invocation<CommandName> };

const refuse = (code: string, message: string, allowed?: string): InputError =>
  new InputError({ code, place: {}, message, ...(allowed === undefined ? {} : { allowed }) });

/**
 * Reads a command line by the table of commands.
 *
 * @param argv what stands behind the program's name
 * @throws InputError `unknown-command`, `missing-command`, `unknown-option`, `missing-operand`, `extra-operand`,
 *   `option-value`
 */
export function parseCommandLine(argv: readonly string[]): Request {
  const [first, ...rest] = argv;
  const names = Object.keys(COMMANDS).join(', ');
  if (first === undefined)
    throw refuse('missing-command', 'no command was given', `${names}; --help tells more`);
  if (first === '--version' || first === '-V') return { kind: 'version' };
  if (first === '--help' || first === '-h') return { kind: 'help', command: null };
  if (first === 'help') {
    const topic = rest[0];
    if (topic === undefined) return { kind: 'help', command: null };
    if (isCommand(topic)) return { kind: 'help', command: topic };
    throw refuse('unknown-command', `'${topic}' is no command`, names);
  }
  if (!isCommand(first))
    throw first.startsWith('-')
      ? refuse('unknown-option', `'${first}' is no option of ridgehold itself`, '--help, --version')
      : refuse('unknown-command', `'${first}' is no command`, names);
  return parseCommand(first, rest);
}

function parseCommand(command: CommandName, argv: readonly string[]): Request {
  const { options: names, operands } = COMMANDS[command];
  const options: NonNullable<ParseArgsConfig['options']> = {};
  for (const name of names) {
    const row = OPTIONS[name];
    options[name] = {
      type: row.type,
      ...('short' in row ? { short: row.short } : {}),
      ...('multiple' in row ? { multiple: row.multiple } : {}),
    };
  }
  const { values, positionals } = strictly(command, { args: [...argv], options, allowPositionals: true });
  if (values.help === true) return { kind: 'help', command };
  const required = operands.filter((name) => !name.startsWith('['));
  if (positionals.length < required.length)
    throw refuse(
      'missing-operand',
      `${required[positionals.length]} is missing`,
      `ridgehold ${command} ${operands.join(' ')}`,
    );
  if (positionals.length > operands.length && !operands.at(-1)?.endsWith('...'))
    throw refuse(
      'extra-operand',
      `'${positionals[operands.length]}' is one too many`,
      `ridgehold ${command} ${operands.join(' ')}`,
    );
  for (const name of names) {
    const row = OPTIONS[name];
    const value = values[name];
    if (value === '')
      throw refuse('option-value', `--${name} is empty`, 'value' in row ? row.value : undefined);
    if ('choices' in row && value !== undefined && !row.choices.some((choice) => choice === value))
      throw refuse('option-value', `--${name} cannot be '${String(value)}'`, row.choices.join(', '));
  }
  const filled = Object.fromEntries(
    names.map((name) => {
      const row = OPTIONS[name];
      return [name, values[name] ?? ('multiple' in row ? [] : row.type === 'boolean' ? false : undefined)];
    }),
  );
  // The table gave both the parser its options and the type its members: they have the same names and kinds.
  return {
    kind: 'command',
    invocation: { command, operands: positionals, values: filled } as unknown as Invocation<CommandName>,
  };
}

/** parseArgs with its complaints in the program's own words. */
function strictly(
  command: CommandName,
  config: ParseArgsConfig,
): { values: Record<string, unknown>; positionals: string[] } {
  try {
    return parseArgs({ ...config, strict: true }) as {
      values: Record<string, unknown>;
      positionals: string[];
    };
  } catch (error) {
    const allowed = COMMANDS[command].options.map((name) => `--${name}`).join(', ');
    const message = error instanceof Error ? (error.message.split(/\. |\n/)[0] ?? '') : String(error);
    throw refuse(
      'unknown-option',
      `ridgehold ${command}: ${message.replace(/^U/, 'u').replace(/^O/, 'o')}`,
      allowed,
    );
  }
}
