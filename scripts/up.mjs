// `npm run up`: from a fresh clone to a running demo. A second run is quick and keeps the data.
import { spawn } from 'node:child_process';
import http from 'node:http';
import path from 'node:path';
import { buildOnce, installPackages, requireNode, root, run, say, stop } from './prepare.mjs';

const port = process.env.PORT ?? '3000';
const address = process.env.WITNESSMARK_URL ?? `http://localhost:${port}`;
const isDemo = (process.env.WITNESSMARK_ORIGIN ?? 'demo.example') === 'demo.example';

requireNode();
installPackages();
buildOnce();
if (isDemo) run('npm', ['run', 'seed', '--silent']);

say(`Starting on ${address}`);
const next = path.join(root, 'node_modules', 'next', 'dist', 'bin', 'next');
const server = spawn(process.execPath, [next, 'start', '-p', port], {
  cwd: root,
  stdio: 'inherit',
  env: { ...process.env, WITNESSMARK_URL: address },
});
server.on('exit', (code) => process.exit(code ?? 0));
for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => server.kill(signal));

await waitUntilHealthy();
if (isDemo) {
  run('npm', ['run', 'seed', '--silent', '--', '--sign-ins']);
}
say(`Witnessmark runs on ${address}. Ctrl+C ends it; the data stays in ${process.env.WITNESSMARK_DATA ?? './data'}.`);

async function waitUntilHealthy() {
  const until = Date.now() + 60_000;
  while (Date.now() < until) {
    if (await isHealthy()) return;
    await new Promise((resolve) => setTimeout(resolve, 300));
  }
  stop(`The server did not answer on port ${port} within a minute; its message stands above.`);
}

function isHealthy() {
  return new Promise((resolve) => {
    http
      .get({ host: '127.0.0.1', port, path: '/api/health' }, (response) => {
        response.resume();
        resolve(response.statusCode === 200);
      })
      .on('error', () => resolve(false));
  });
}
