import { createHash } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import path from 'node:path';
import { build, type BuildOptions } from 'esbuild';
import { verifyPageStyles } from '@/scripts/verify-page-styles';

const standalone = 'components/reader/verify/standalone';

/**
 * `verify.html`: one file with everything in it, which opens from disk and reaches no network. Its policy names each
 * script and the style sheet by its hash, so that nothing else in it could run.
 */
export async function buildVerifyPage(root: string): Promise<string> {
  const { version } = JSON.parse(await readFile(path.join(root, 'package.json'), 'utf8')) as { version: string };
  const check = await bundle(root, `${standalone}/check-program.ts`, {});
  const page = await bundle(root, `${standalone}/page.tsx`, {
    alias: { 'next/link': path.join(root, standalone, 'plain-link.tsx') },
    define: { 'process.env.NODE_ENV': '"production"', WITNESSMARK_VERSION: JSON.stringify(version) },
  });
  const styles = await verifyPageStyles(root, page.sources);
  const policy = [
    "default-src 'none'",
    `script-src ${hashOf(check.text)} ${hashOf(page.text)}`,
    `style-src ${hashOf(styles)}`,
    'font-src data:',
    'worker-src blob:',
    "base-uri 'none'",
    "form-action 'none'",
  ].join('; ');
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${policy}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="referrer" content="no-referrer">
<meta name="color-scheme" content="light dark">
<title>Check a packet · Witnessmark</title>
<!-- Made by scripts/build-verify.ts. Read the source there; change nothing here. The faces inside, Barlow and Barlow
Condensed, are under the SIL Open Font License 1.1, https://openfontlicense.org. -->
<style>${styles}</style>
</head>
<body>
<div id="root"></div>
<noscript><p>The check is a program inside this page. Allow it to run scripts: it can reach no network.</p></noscript>
<script type="text/plain" id="check-program">${check.text}</script>
<script>${page.text}</script>
</body>
</html>
`;
}

async function bundle(
  root: string,
  entry: string,
  options: BuildOptions,
): Promise<{ text: string; sources: string[] }> {
  const result = await build({
    absWorkingDir: root,
    entryPoints: [entry],
    tsconfig: 'tsconfig.json',
    bundle: true,
    write: false,
    metafile: true,
    platform: 'browser',
    format: 'iife',
    target: 'es2022',
    jsx: 'automatic',
    mainFields: ['module', 'main'],
    charset: 'utf8',
    minify: true,
    legalComments: 'inline',
    define: { 'process.env.NODE_ENV': '"production"' },
    ...options,
  });
  const [output] = result.outputFiles ?? [];
  if (output === undefined) throw new Error(`The build of ${entry} wrote nothing.`);
  // An end of script within a text would end the element that it stands in.
  const text = output.text
    .trim()
    .replaceAll(/<\/(?=script)/gi, '<\\/')
    .replaceAll('<!--', '<\\!--');
  return { text, sources: Object.keys(result.metafile?.inputs ?? {}).filter((file) => !file.includes('node_modules')) };
}

/** As a policy writes it (CSP level 3, hash sources). */
function hashOf(text: string): string {
  return `'sha256-${createHash('sha256').update(text, 'utf8').digest('base64')}'`;
}
