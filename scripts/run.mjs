// Start a command in the project's root, its output shown; the exit status comes back.
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

export const root = fileURLToPath(new URL('..', import.meta.url));

export function run(command, args, env = {}) {
  console.log(`$ ${command} ${args.join(' ')}`);
  const done = spawnSync(command, args, { cwd: root, stdio: 'inherit', env: { ...process.env, ...env } });
  return done.error ? 127 : (done.status ?? 1);
}

export function must(command, args, env) {
  const status = run(command, args, env);
  if (status !== 0) process.exit(status);
}

/** A package's own command, started by Node so that no shell or PATH is needed. */
export function bin(path, args) {
  return [process.execPath, [`node_modules/${path}`, ...args]];
}
