import { TOOL_VERSION } from '../run/tool-version.ts';
import type { CommandName, Invocation } from './commands.ts';
import { DONE } from './exit-status.ts';
import { commandHelp, programHelp } from './help.ts';
import { parseCommandLine } from './parse-command-line.ts';
import { tellFailure } from './tell-failure.ts';

/** @param program where the program stands */
type Handler<Name extends CommandName> = (
  invocation: Invocation<Name>,
  program: string,
) => number | Promise<number>;

// Loaded when they are called for: --version does not wait for the parsers of XML and YAML.
const HANDLERS: { readonly [Name in CommandName]: () => Promise<Handler<Name>> } = {
  run: async () => (await import('./run-command.ts')).runCommand,
  road: async () => (await import('./road-command.ts')).roadCommand,
  compare: async () => (await import('./compare-command.ts')).compareCommand,
  identify: async () => (await import('./identify-command.ts')).identifyCommand,
  tune: async () => (await import('./tune-command.ts')).tuneCommand,
  workbench: async () => (await import('./workbench-command.ts')).workbenchCommand,
  new: async () => (await import('./new-command.ts')).newCommand,
  schema: async () => (await import('./schema-command.ts')).schemaCommand,
};

async function perform<Name extends CommandName>(
  invocation: Invocation<Name>,
  program: string,
): Promise<number> {
  const handler = await HANDLERS[invocation.command]();
  return handler(invocation, program);
}

/**
 * The program: reads the command line, does what it says, tells people what went wrong.
 *
 * @param argv what stands behind the program's name
 * @param program URL of the file that was started
 * @returns the exit status
 */
export async function main(argv: readonly string[], program: string): Promise<number> {
  // `ridgehold ... --json | head` closes the pipe early: that is no fault.
  process.stdout.on('error', (error: NodeJS.ErrnoException) => {
    if (error.code !== 'EPIPE') throw error;
  });
  try {
    const request = parseCommandLine(argv);
    switch (request.kind) {
      case 'version':
        process.stdout.write(`ridgehold ${TOOL_VERSION}\n`);
        return DONE;
      case 'help':
        process.stdout.write(request.command === null ? programHelp() : commandHelp(request.command));
        return DONE;
      case 'command':
        return await perform(request.invocation, program);
    }
  } catch (error) {
    return tellFailure(error);
  }
}
