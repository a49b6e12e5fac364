'use client';

import { useDraftInScreen } from '@/components/garage/draft-context';
import { worksheetHash } from '@/components/garage/place';
import { TakePhoto } from '@/components/garage/take-photo';
import { clockTime } from '@/components/garage/status-words';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { procedureFor, type HoldPoint } from '@/lib/domain/procedures';
import type { AttachmentRole } from '@/lib/evidence/format';
import type { WorksheetTask } from '@/lib/domain/worksheet';
import { RecordEntry } from './record-entry';
import { taskTitle } from './task-fields';
import { useWorksheet } from './worksheet-context';

function photoRole({ records, key }: HoldPoint): AttachmentRole {
  if (records?.inspection?.startsWith('Magnet')) return 'magnet';
  if (records?.part !== undefined) return 'part';
  return key === 'support' || key === 'open-fill-point' ? 'as-found' : 'as-left';
}

interface HoldPointScreenProps {
  task: WorksheetTask;
  step: string;
}

/** One hold point over the whole screen. The work waits here; what it records is entered in the same place. */
export function HoldPointScreen({ task, step }: HoldPointScreenProps) {
  const { id } = useWorksheet();
  const { opened } = useDraftInScreen();
  const procedure = procedureFor(task.key);
  const index = procedure.holdPoints.findIndex(({ key }) => key === step);
  const point = procedure.holdPoints[index];
  if (!point) return null;
  const following = procedure.holdPoints[index + 1];
  const doneAt = task.steps[point.key];
  const leave = (hash: string) => window.location.replace(hash);
  const back = worksheetHash(id, task.id);
  const onward = following ? worksheetHash(id, task.id, following.key) : back;
  function done() {
    if (doneAt === undefined) void opened.set({ [`tasks/${task.id}/steps/${step}`]: new Date().toISOString() });
    leave(onward);
  }
  return (
    <Dialog
      isOpen
      isFull
      title={point.title}
      closeText="All hold points"
      onClose={() => leave(back)}
      actions={
        <div className="grid w-full grid-cols-[minmax(0,2fr)_minmax(0,3fr)] gap-2.5 lg:max-w-xl">
          {doneAt === undefined ? (
            <Button size="big" onClick={() => leave(onward)}>
              Leave open
            </Button>
          ) : (
            <Button size="big" onClick={() => void opened.set({ [`tasks/${task.id}/steps/${step}`]: null })}>
              Undo
            </Button>
          )}
          <Button size="big" look="main" onClick={done}>
            {doneAt === undefined ? 'Done' : 'Next'}
          </Button>
        </div>
      }
    >
      <div className="mx-auto max-w-2xl">
        <p className="label">
          {taskTitle(task)}, hold point {index + 1} of {procedure.holdPoints.length}
          {doneAt === undefined ? null : `, done ${clockTime(doneAt)}`}
        </p>
        <p className="mt-3 text-xl leading-snug">{point.text}</p>
        {point.caution ? (
          <p className="mt-4 border-l-4 border-margin bg-sheet py-3 pr-3 pl-4 text-lg leading-snug font-medium">
            <span className="block font-condensed text-base text-soft">Caution</span>
            {point.caution}
          </p>
        ) : null}
        {point.leaves && doneAt === undefined ? <p className="tag mt-3">From here on: {point.leaves.state}</p> : null}
        <div className="mt-5">
          <TakePhoto isWide role={photoRole(point)} />
        </div>
        {point.records ? (
          <div className="mt-6">
            <RecordEntry task={task.id} procedure={procedure} records={point.records} isAlone />
          </div>
        ) : null}
      </div>
    </Dialog>
  );
}
