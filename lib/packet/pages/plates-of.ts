import { blackedOutFrom } from '@/lib/domain/blacked-out';
import { groupHash } from '@/lib/domain/hash-words';
import type { Attachment } from '@/lib/evidence/format';
import type { PacketContent } from '../content';
import type { Plate } from '../sheet/plates';
import { roleWords } from '@/lib/domain/record-words';
import { bytesWords, takenWords } from '../words';

/** The attachments of an entry or a purchase as plates, numbered `prefix.1`, `prefix.2`. */
export function platesOf(prefix: string, attachments: Attachment[], { files, zone }: PacketContent): Plate[] {
  return attachments.map((attachment, i) => {
    const { role, caption, copy, sha256, mediaType, bytes } = attachment;
    const file = copy === undefined ? undefined : files.get(copy.sha256);
    const from = blackedOutFrom(attachment);
    const said = from === null ? caption : 'Blacked-out copy, made here';
    const words = said === '' || said === roleWords[role] ? [] : [said];
    const hashes = [{ of: from === null ? 'Original' : 'Blacked-out copy', hash: groupHash(sha256) }];
    if (from !== null) hashes.push({ of: 'Made from', hash: groupHash(from) });
    if (copy !== undefined && copy.sha256 !== sha256) hashes.push({ of: 'Shared copy', hash: groupHash(copy.sha256) });
    const plate = {
      title: `${prefix}.${i + 1} ${roleWords[role]}`,
      details: [...words, takenWords(attachment, zone), ...removedWords(copy?.removed)],
      hashes,
    };
    if (file?.size != null) return { ...plate, picture: { id: file.sha256, size: file.size, source: file.source } };
    const what = `${mediaType}, ${bytesWords(bytes)}`;
    const attached = file === undefined ? 'not in this packet' : `its shared copy is attached as ${file.name}`;
    return { ...plate, reason: `Not drawn: ${what}; ${attached}.` };
  });
}

function removedWords(removed: string[] | undefined): string[] {
  return removed === undefined || removed.length === 0
    ? []
    : [
        `Taken out of the shared copy: ${removed.map((one) => one.replace('other EXIF', 'other camera data (EXIF)')).join(', ')}.`,
      ];
}
