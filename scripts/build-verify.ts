import { writeFile } from 'node:fs/promises';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';
import { buildVerifyPage } from '@/scripts/verify-page';

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '..');
export const verifyFile = path.join(root, 'scripts', 'verify.mjs');
export const verifyPageFile = path.join(root, 'scripts', 'verify.html');

/** The one-file verifier: `lib/evidence` and its command, the same bytes on every machine. */
export async function buildVerify(): Promise<string> {
  const result = await build({
    absWorkingDir: root,
    entryPoints: ['scripts/verify-cli.ts'],
    tsconfig: 'tsconfig.json',
    bundle: true,
    write: false,
    platform: 'node',
    format: 'esm',
    target: 'node20',
    mainFields: ['module', 'main'],
    charset: 'utf8',
    minify: true,
    legalComments: 'eof',
    banner: {
      js: '#!/usr/bin/env node\n// Made from lib/evidence by scripts/build-verify.ts. Read the source there; change nothing here.',
    },
  });
  const [output] = result.outputFiles;
  if (output === undefined) throw new Error('The build of the verifier wrote nothing.');
  return output.text;
}

/** The page that checks, as one file; the same bytes on every machine. */
export const buildPage = (): Promise<string> => buildVerifyPage(root);

if (process.argv[1] !== undefined && path.resolve(process.argv[1]) === fileURLToPath(import.meta.url)) {
  await writeFile(verifyFile, await buildVerify(), { mode: 0o755 });
  await writeFile(verifyPageFile, await buildPage());
}
