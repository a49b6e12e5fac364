import { randomBytes } from 'node:crypto';
import { writeSync } from 'node:fs';
import { prepareDatabase, closeDatabase, write } from '@/db/index';
import { files } from '@/db/models/drafts';
import { putBlob } from '@/lib/ports/blob-store';
import type { Attachment } from '@/lib/evidence/format';
import { appendEntry } from '@/lib/services/append-entry';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';

// A process that seals. `loop PERSON FROM LOG…`: one entry after another, each with a file of its own, until it is killed.
// `parallel PERSON PREFIX COUNT LOG…`: that many at once, then it ends. Each acknowledged entry is one line of output.
const [mode, person = '', third = '', ...rest] = process.argv.slice(2);

/** Written before the call returns: what is on the pipe has left this process. */
const acknowledge = (key: string, sealed: { log: string; seq: number; leafHash: string }) =>
  writeSync(1, `${key} ${sealed.log} ${sealed.seq} ${sealed.leafHash}\n`);

async function sealOne(log: string, key: string, hasFile: boolean): Promise<void> {
  const attachments: Attachment[] = [];
  if (hasFile) {
    const { sha256, bytes } = await putBlob(randomBytes(2_000));
    const at = new Date().toISOString();
    await write((transaction) =>
      files.insert({ sha256, bytes, mediaType: 'image/jpeg', createdAt: at }, { transaction }),
    );
    attachments.push({
      sha256,
      bytes,
      mediaType: 'image/jpeg',
      role: 'odometer',
      receivedAt: at,
      caption: key,
    });
  }
  const sealed = await appendEntry({
    log,
    kind: 'reading',
    by: person,
    idempotencyKey: key,
    parts: async () => ({
      author: { person, name: 'Imke Vandersloot', role: 'owner' },
      body: { on: '2026-04-18', odometer: { value: '18300', unit: '[mi_i]', instrument: 0 } },
      ...(hasFile ? { attachments } : {}),
    }),
  });
  acknowledge(key, sealed);
}

async function main(): Promise<void> {
  await prepareDatabase();
  if (mode === 'loop') {
    writeSync(1, 'ready\n');
    for (let number = Number(third); ; number += 1) await sealOne(rest[0] ?? '', `loop/${number}`, true);
  }
  const [count, ...logs] = rest;
  const all = Array.from({ length: Number(count) }, (_, number) =>
    sealOne(logs[number % logs.length] ?? '', `${third}/${number}`, false),
  );
  await Promise.all(all);
  await stampingSettled();
  await closeDatabase();
}

main().catch((error: unknown) => {
  console.error(error);
  process.exitCode = 1;
});
