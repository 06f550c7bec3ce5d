#!/usr/bin/env node
// Checks the version of Node before anything that an old one could not even load.
const REQUIRED = [20, 19] as const;
const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
if (major < REQUIRED[0] || (major === REQUIRED[0] && minor < REQUIRED[1])) {
  process.stderr.write(
    `error: ridgehold needs Node ${REQUIRED.join('.')} or later, and this is Node ${process.versions.node}\n`,
  );
  process.exitCode = 2;
} else {
  const { main } = await import('./program.ts');
  process.exitCode = await main(process.argv.slice(2), import.meta.url);
}

export {};
