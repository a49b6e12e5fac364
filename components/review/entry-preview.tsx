import { Thumb } from '@/components/ledger/thumb';
import { roleWords } from '@/lib/domain/record-words';
import { UserText } from '@/components/ui/user-text';
import type { Attachment, ServiceBody } from '@/lib/evidence/format';
import { paths } from '@/lib/paths';
import { ServiceBoxes } from './service-boxes';
import { TaskLines } from './task-lines';

function kindOf({ role, mediaType }: Attachment): 'pdf' | 'receipt' | 'photo' {
  if (mediaType === 'application/pdf') return 'pdf';
  return role.startsWith('receipt') ? 'receipt' : 'photo';
}

export interface EntryPreviewProps {
  body: ServiceBody;
  notes: string | undefined;
  attachments: Attachment[];
  machine: string;
}

/** A service as the record will show it. */
export function EntryPreview({ body, notes, attachments, machine }: EntryPreviewProps) {
  return (
    <article aria-label="The entry">
      <h2 className="mb-3">
        <UserText>{body.title}</UserText>
      </h2>
      <ServiceBoxes body={body} />
      {attachments.length === 0 ? null : (
        <ul aria-label="Pictures and papers" className="mt-4 flex flex-wrap gap-4">
          {attachments.map((attachment) => (
            <li key={attachment.sha256} className="w-28">
              <Thumb
                src={paths.api.file(attachment.sha256, 'thumb', machine)}
                // The words beneath a picture say what it is; said twice they are only noise.
                alt={kindOf(attachment) === 'pdf' ? roleWords[attachment.role] : ''}
                kind={kindOf(attachment)}
              />
              <span className="tag mt-1 block">
                {roleWords[attachment.role]}
                {attachment.caption === '' ? null : (
                  <>
                    : <UserText>{attachment.caption}</UserText>
                  </>
                )}
              </span>
            </li>
          ))}
        </ul>
      )}
      <TaskLines tasks={body.tasks} zone={body.finishedAt.zone} />
      {notes === undefined ? null : (
        <section className="mt-6">
          <h3 className="mb-1">Notes</h3>
          <p className="max-w-[70ch]">
            <UserText isMultiline>{notes}</UserText>
          </p>
        </section>
      )}
      <section className="mt-6">
        <h3 className="mb-1">Statement</h3>
        <p className="max-w-[70ch]">
          <UserText isMultiline>{body.statement}</UserText>
        </p>
        {body.recorded === 'from-paper' ? <p className="tag mt-1">Recorded later, from paper.</p> : null}
      </section>
    </article>
  );
}
