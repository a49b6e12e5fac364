// Plain JavaScript on purpose: it runs before anything is installed.
import { execFileSync, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import path from 'node:path';

export const root = path.resolve(import.meta.dirname, '..');
const buildFolder = path.join(root, process.env.WITNESSMARK_BUILD ?? '.next');

export function say(sentence) {
  console.log(`\n> ${sentence}`);
}

export function stop(sentence) {
  console.error(`\nStopped: ${sentence}\n`);
  process.exit(1);
}

export function run(command, args, environment = {}) {
  const { status, error } = spawnSync(command, args, {
    cwd: root,
    stdio: 'inherit',
    env: { ...process.env, ...environment },
  });
  if (error) stop(`${command} could not be started: ${error.message}`);
  if (status !== 0) stop(`"${command} ${args.join(' ')}" ended with status ${status}; its message stands above.`);
}

const has = (command) => spawnSync('sh', ['-c', `command -v ${command}`]).status === 0;

export function requireNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major < 20 || (major === 20 && minor < 19)) stop(`Node 20.19 or newer is needed; this is ${process.version}.`);
}

/**
 * Makes sure the commands are there. As root on Debian they are installed; otherwise this names what is missing and how
 * to get it.
 * @param {Record<string, string>} packageOf the Debian package of each command
 */
export function requireCommands(packageOf, why) {
  const missing = Object.keys(packageOf).filter((command) => !has(command));
  if (missing.length === 0) return;
  const packages = [...new Set(missing.map((command) => packageOf[command]))];
  if (process.getuid?.() === 0 && has('apt-get')) {
    say(`Installing ${packages.join(', ')} (${why})`);
    run('apt-get', ['update', '-q'], { DEBIAN_FRONTEND: 'noninteractive' });
    run('apt-get', ['install', '-y', '-q', ...packages], { DEBIAN_FRONTEND: 'noninteractive' });
    return;
  }
  stop(`Missing: ${missing.join(', ')} (${why}). On Debian: sudo apt-get install ${packages.join(' ')}`);
}

/** Installs the npm packages if there are none yet or the lock file changed. */
export function installPackages() {
  const lock = createHash('sha256')
    .update(readFileSync(path.join(root, 'package-lock.json')))
    .digest('hex');
  const note = path.join(root, 'node_modules', '.witnessmark-lock');
  if (existsSync(note) && readFileSync(note, 'utf8') === lock) return;
  requireCommands({ python3: 'python3', make: 'make', 'g++': 'g++' }, 'sqlite3 is built from source');
  say('Installing packages (sqlite3 is compiled: a minute or two)');
  run('npm', ['ci', '--no-audit', '--no-fund']);
  writeFileSync(note, lock);
}

/** Builds for production unless nothing that goes into a build changed. */
export function buildOnce() {
  const sources = fingerprintSources();
  const note = path.join(buildFolder, 'witnessmark-sources');
  if (existsSync(note) && readFileSync(note, 'utf8') === sources) return;
  say('Building (about a minute)');
  run('npm', ['run', 'build', '--silent']);
  writeFileSync(note, sources);
}

function fingerprintSources() {
  const hash = createHash('sha256');
  const tops = ['app', 'components', 'lib', 'db', 'public', 'fonts', 'scripts'];
  const files = ['package-lock.json', 'next.config.mjs', 'proxy.ts', 'instrumentation.ts', 'tsconfig.json'];
  const visit = (file) => {
    if (!existsSync(file)) return;
    if (statSync(file).isDirectory()) {
      for (const name of readdirSync(file).sort()) visit(path.join(file, name));
    } else {
      hash.update(path.relative(root, file)).update(readFileSync(file));
    }
  };
  for (const name of [...tops, ...files]) visit(path.join(root, name));
  return hash.digest('hex');
}

export function commandOutput(command, args) {
  return execFileSync(command, args, { cwd: root, encoding: 'utf8' });
}
