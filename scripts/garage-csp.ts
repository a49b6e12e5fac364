import { createHash } from 'node:crypto';
import { readFile, writeFile } from 'node:fs/promises';
import path from 'node:path';

/**
 * Hashes of the inline scripts of the built garage page, for its Content-Security-Policy. The page is static, so it can
 * carry no nonce; its inline scripts are the same for everybody until the next build (CSP level 3, hash sources).
 */
export function inlineScriptHashes(html: string): string[] {
  const scripts = [...html.matchAll(/<script(?<attributes>[^>]*)>(?<text>[\s\S]*?)<\/script>/g)];
  const inline = scripts.filter(({ groups }) => !/\ssrc=/.test(groups?.attributes ?? ''));
  const hashes = inline.map(({ groups }) => {
    const digest = createHash('sha256')
      .update(groups?.text ?? '', 'utf8')
      .digest('base64');
    return `sha256-${digest}`;
  });
  return [...new Set(hashes)].sort();
}

async function run(): Promise<void> {
  const build = path.resolve(process.env.WITNESSMARK_BUILD || '.next');
  const html = await readFile(path.join(build, 'server/app/garage.html'), 'utf8');
  const scriptHashes = inlineScriptHashes(html);
  if (scriptHashes.length === 0) throw new Error('The built garage page has no inline script: it was not prerendered.');
  await writeFile(path.join(build, 'garage-csp.json'), `${JSON.stringify({ scriptHashes }, null, 2)}\n`);
  process.stdout.write(`Hashed ${scriptHashes.length} inline scripts of the garage page.\n`);
}

if (process.argv[1] && path.resolve(process.argv[1]) === import.meta.filename) await run();
