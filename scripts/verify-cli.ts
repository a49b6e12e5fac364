import { readdir, readFile, realpath } from 'node:fs/promises';
import path from 'node:path';
import { parseArgs } from 'node:util';
import { aboutLines } from '@/lib/evidence/about-lines';
import { readContainer } from '@/lib/evidence/container';
import type { Finding, Outcome } from '@/lib/evidence/finding';
import { givenKey } from '@/lib/evidence/given-key';
import { readRoots } from '@/lib/evidence/roots';
import { verifyBundle } from '@/lib/evidence/verify';
import { companionNames, type GivenFile } from '@/lib/evidence/verify-files';
import { printable, reportText } from '@/scripts/verify-report';

const usage = `Checks a Witnessmark packet, export (ZIP) or record.json. Needs nothing but Node.

  node scripts/verify.mjs FILE [--key KEY] [--files DIR] [--against OLDER] [--tsa-roots PEM] [--json]

  --key KEY        the verifier key you have from elsewhere (name+hex+base64), or its fingerprint
  --files DIR      folder with the pictures and papers that belong to the record
  --against OLDER  an older packet, export, record.json or signed checkpoint
  --tsa-roots PEM  root certificates of time-stamp authorities that you trust, got from the authorities
                   themselves; without them no time is called proven
  --json           print the whole finding as JSON

Exit code 0: unchanged. 1: altered. 2: unreadable, or called wrongly.
`;
const exitCodes: Record<Outcome, number> = { unchanged: 0, altered: 1, unreadable: 2 };

try {
  process.exitCode = await run(process.argv.slice(2));
} catch (error) {
  process.stderr.write(`${printable(error instanceof Error ? error.message : String(error))}\n`);
  process.exitCode = exitCodes.unreadable;
}

async function run(argumentsGiven: string[]): Promise<number> {
  const { values, positionals } = readArguments(argumentsGiven);
  const [file] = positionals;
  if (values.help === true) {
    process.stdout.write(usage);
    return 0;
  }
  if (file === undefined || positionals.length > 1) {
    process.stderr.write(usage);
    return exitCodes.unreadable;
  }
  const { finding, bundleText } = await check(file, values);
  process.stdout.write(
    values.json === true
      ? `${printable(JSON.stringify(finding, null, 2))}\n`
      : reportText(file, finding, aboutLines(bundleText)),
  );
  return exitCodes[finding.outcome];
}

interface Options {
  key?: string | undefined;
  files?: string | undefined;
  against?: string | undefined;
  'tsa-roots'?: string | undefined;
}

async function check(
  file: string,
  { key, files: folder, against, 'tsa-roots': rootsFile }: Options,
): Promise<{ finding: Finding; bundleText: string }> {
  const bytes = await readGiven(file);
  const roots = rootsFile === undefined ? [] : await readGivenRoots(rootsFile);
  let container: Awaited<ReturnType<typeof readContainer>>;
  try {
    container = await readContainer(bytes);
  } catch (error) {
    // The empty text is no record either: the finding keeps its shape, the sentence says why.
    const sentence = error instanceof Error ? error.message : String(error);
    return { finding: { ...verifyBundle({ bundleText: '' }), sentence }, bundleText: '' };
  }
  const given = givenKey(key ?? '', container.bundleText);
  if (given.refusal !== undefined) throw new Error(`Nothing was checked. The key you gave: ${given.refusal}`);
  const beside = folder === undefined ? undefined : await filesIn(folder, await realpath(file));
  const files =
    container.files === undefined && beside === undefined ? undefined : [...(container.files ?? []), ...(beside ?? [])];
  const finding = verifyBundle({
    bundleText: container.bundleText,
    at: new Date().toISOString(),
    roots,
    ...(files && { files }),
    ...(given.verifierKey !== undefined && { key: given.verifierKey }),
    ...(against !== undefined && { against: await readOlder(against) }),
    ...(container.pages && { pages: container.pages }),
  });
  return { finding, bundleText: container.bundleText };
}

async function readGiven(file: string): Promise<Buffer> {
  try {
    return await readFile(file);
  } catch (error) {
    throw new Error(`The file ${file} cannot be opened: is the name right? (${error instanceof Error ? error.message : String(error)})`);
  }
} // prettier-ignore

/** Without the roots that were meant, no answer is better than one that calls everything unproven. */
async function readGivenRoots(file: string): Promise<Uint8Array[]> {
  const bytes = await readGiven(file);
  try {
    return readRoots(bytes);
  } catch (error) {
    throw new Error(`Nothing was checked. The roots in ${file}: ${error instanceof Error ? error.message : String(error)}`);
  }
} // prettier-ignore

async function readOlder(file: string): Promise<string> {
  try {
    return (await readContainer(await readGiven(file))).bundleText;
  } catch (error) {
    throw new Error(`The older file could not be read. ${error instanceof Error ? error.message : String(error)}`);
  }
}

async function filesIn(folder: string, except: string): Promise<GivenFile[]> {
  const files: GivenFile[] = [];
  for (const item of await readdir(folder, { withFileTypes: true, recursive: true })) {
    const full = path.join(item.parentPath ?? item.path, item.name);
    if (!item.isFile() || (await realpath(full)) === except) continue;
    const name = path.relative(folder, full).split(path.sep).join('/');
    // The folder may be an unpacked export.
    files.push({
      name,
      bytes: await readFile(full),
      ...(companionNames.includes(name) && { isCompanion: true as const }),
    });
  }
  return files;
}

function readArguments(argumentsGiven: string[]) {
  const text = { type: 'string' } as const;
  const flag = { type: 'boolean' } as const;
  const options = { key: text, files: text, against: text, 'tsa-roots': text, json: flag, help: flag };
  try {
    return parseArgs({ args: argumentsGiven, allowPositionals: true, options });
  } catch (error) {
    throw new Error(`${error instanceof Error ? error.message : String(error)}\n\n${usage}`);
  }
}
