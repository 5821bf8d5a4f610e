#!/usr/bin/env node
/**
 * Makes a fresh clone ready: installs the locked packages and builds, each only when it is out of date.
 * `--tests` also installs, where it can, the system programs that the browser and PDF tests look through.
 */
import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync, statSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = join(dirname(fileURLToPath(import.meta.url)), '..');
const modifiedMs = (path) => (existsSync(path) ? statSync(path).mtimeMs : 0);
const newestMs = (folder) =>
  Math.max(
    ...readdirSync(folder, { recursive: true, withFileTypes: true }).map((entry) =>
      entry.isFile() ? modifiedMs(join(entry.parentPath, entry.name)) : 0,
    ),
  );

function run(program, args) {
  const outcome = spawnSync(program, args, { cwd: root, stdio: ['ignore', 2, 2] });
  if (outcome.status !== 0) {
    console.error(`${program} ${args.join(' ')} failed${outcome.error ? `: ${outcome.error.message}` : ''}`);
    process.exit(1);
  }
}

const installed = join(root, 'node_modules', '.package-lock.json');
if (modifiedMs(installed) < modifiedMs(join(root, 'package-lock.json')))
  run('npm', ['ci', '--no-audit', '--no-fund', '--loglevel=error']);

const built = join(root, 'dist', 'main.js');
if (!existsSync(built) || newestMs(join(root, 'dist')) < newestMs(join(root, 'src'))) run('npm', ['run', '--silent', 'build']);

if (process.argv.includes('--tests')) installTestPrograms();

/** Tests that need these skip loudly when they are missing; nothing else depends on them. */
function installTestPrograms() {
  const wanted = [
    ['chromium', 'chromium'],
    ['pdftoppm', 'poppler-utils'],
    ['qpdf', 'qpdf'],
  ];
  const found = (program) => (process.env.PATH ?? '').split(':').some((folder) => existsSync(join(folder, program)));
  const missing = wanted.filter(([program]) => !found(program)).map(([, debianPackage]) => debianPackage);
  if (missing.length === 0) return;
  const isRoot = process.getuid?.() === 0;
  if (isRoot && found('apt-get')) {
    const environment = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
    const options = { stdio: ['ignore', 2, 2], env: environment };
    spawnSync('apt-get', ['update', '-qq'], options);
    spawnSync('apt-get', ['install', '-y', '-qq', '--no-install-recommends', ...missing], options);
  }
  const still = wanted.filter(([program]) => !found(program)).map(([program]) => program);
  if (still.length > 0)
    console.error(
      `note: ${still.join(', ')} not found; the tests that look through ${still.length > 1 ? 'them' : 'it'} will be skipped`,
    );
}
