import type { Metadata } from 'next';
import { bytesWords } from '@/components/entry/words';
import { AnchorButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { readExportSize } from '@/lib/services/export-record';
import { readMachineSettings } from '@/lib/services/read-machine-settings';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Export' };

const choices = [
  { files: 'originals', title: 'With every original', words: 'Pictures and papers byte for byte as they were received, with the places and camera data that are in them.' },
  { files: 'copies', title: 'Without original pictures', words: 'The shared copies instead, and the papers. The hashes of the originals stay in the record.' },
] as const; // prettier-ignore

export default async function ExportPage({ params }: { params: Promise<{ machine: string }> }) {
  const { machine: machineId } = await params;
  const person = await requirePerson();
  const sizes = await orNotFound(
    Promise.all(choices.map(({ files }) => readExportSize({ person, machineId, files }))),
  );
  const { machine } = await orNotFound(readMachineSettings({ person, machine: machineId }));
  const missing = sizes[0]?.missing ?? 0;
  return (
    <>
      <PageHead label={<UserText>{machine.name}</UserText>} title="Export the whole record" />
      <p className="max-w-[70ch]">
        A ZIP file with everything that was sealed of this machine, prices too, the pictures and papers, a text that
        explains how it is built, and the program that checks it. It can be read and checked without this installation,
        and brought in on another one to be read there. It is yours: for somebody else, a packet or a viewing link leaves
        out what you choose.
      </p>
      {missing === 0 ? null : (
        <div className="mt-5">
          <Notice tone="gap" title={missing === 1 ? 'One file is missing on this server' : `${missing} files are missing on this server`}>
            The record names them, and the export will say which they are. Tell the steward; a backup may hold them.
          </Notice>
        </div>
      )}
      <ul role="list" className="mt-6 grid max-w-[44rem] gap-4">
        {choices.map(({ files, title, words }, index) => {
          const size = sizes[index];
          return (
            <li key={files} className="grid gap-3 border border-line bg-sheet p-4 sm:p-6">
              <h2>{title}</h2>
              <p>{words}</p>
              {size === undefined || size.isTooLarge ? (
                <p className="tone-gap">
                  It would be {bytesWords(size?.bytes ?? 0)}, and no checker reads more than 1 GB.
                </p>
              ) : (
                <div>
                  <AnchorButton href={paths.api.export(machineId, files)} look={index === 0 ? 'main' : 'plain'} size="big">
                    Download ({bytesWords(size.bytes)})
                  </AnchorButton>
                </div>
              )}
            </li>
          );
        })}
      </ul>
    </>
  );
} // prettier-ignore
