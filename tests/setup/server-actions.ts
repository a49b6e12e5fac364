import { existsSync, readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { buildFolder, isDevServer } from './server';

interface Manifest {
  node: Record<string, { exportedName?: string; filename?: string }>;
}

/** The id under which the built server knows an action, or undefined when no page uses it. */
export function actionId(file: string, name: string): string | undefined {
  const folder = path.join(buildFolder, isDevServer ? 'dev/server' : 'server');
  for (const manifest of manifests(folder)) {
    for (const [id, entry] of Object.entries(manifest.node)) {
      if (entry.filename === file && entry.exportedName === name) return id;
    }
  }
  return undefined;
}

/** A form action's call as React sends it: the previous state and a form, in one multipart body. */
export function actionBody(fields: Record<string, string>): FormData {
  const body = new FormData();
  for (const [name, value] of Object.entries(fields)) body.append(`_1_${name}`, value);
  body.append('0', JSON.stringify([{ ok: false, fields: {}, typed: {} }, '$K1']));
  return body;
}

function manifests(folder: string): Manifest[] {
  if (!existsSync(folder)) return [];
  return readdirSync(folder, { recursive: true, encoding: 'utf8' })
    .filter((name) => path.basename(name) === 'server-reference-manifest.json')
    .map((name) => JSON.parse(readFileSync(path.join(folder, name), 'utf8')) as Manifest);
}
