import 'server-only';
import type { LogLine } from '@/db/queries/lots';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { PartName } from '@/lib/evidence/format';

/** What a stored part says; undefined when it was erased or never given. Sealed parts were checked when they were made. */
export function openedPart<T>(line: LogLine, name: PartName): T | undefined {
  const disclosure = line.parts.get(name);
  return disclosure === undefined ? undefined : (openDisclosure(disclosure).value as T);
}
