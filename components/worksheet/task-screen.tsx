'use client';

import { DraftItem, useDraftInScreen } from '@/components/garage/draft-context';
import { DraftNotes, DraftText } from '@/components/garage/draft-fields';
import { mintId } from '@/components/garage/mint-id';
import { worksheetHash } from '@/components/garage/place';
import { clockTime } from '@/components/garage/status-words';
import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { procedureFor, unfinishedState } from '@/lib/domain/procedures';
import type { WorksheetTask } from '@/lib/domain/worksheet';
import { HoldPointScreen } from './hold-point-screen';
import { PartEntry } from './part-entry';
import { RecordEntry, recordsBesideHoldPoints } from './record-entry';
import { useWorksheet } from './worksheet-context';

/** One task: its hold points in safe order, then everything it records, all on one sheet. */
export function TaskScreen({ task, step }: { task: WorksheetTask; step: string | undefined }) {
  const { opened } = useDraftInScreen();
  const procedure = procedureFor(task.key);
  const state = unfinishedState(task.key, Object.keys(task.steps));
  const recorded = [
    ...procedure.holdPoints.flatMap(({ records }) => records ?? []),
    ...recordsBesideHoldPoints(procedure),
  ];
  const specParts = new Set(procedure.parts);
  return (
    <div className="space-y-6">
      {state ? <Notice tone="gap" title={state} /> : null}
      {task.key === 'free' ? <DraftText path={`tasks/${task.id}/title`} label="What was done" /> : null}
      <HoldPoints task={task} />
      {step === undefined ? (
        <div className="gap-10 *:mb-8 *:break-inside-avoid lg:columns-2">
          {withoutRepeats(recorded).map((records) => (
            <RecordEntry key={JSON.stringify(records)} task={task.id} procedure={procedure} records={records} />
          ))}
          {procedure.key === 'free' ? <FreeInspection task={task.id} /> : null}
          {task.parts
            .filter(({ id }) => !specParts.has(id))
            .map(({ id }) => (
              <PartEntry key={id} task={task.id} part={id} />
            ))}
        </div>
      ) : (
        <HoldPointScreen key={step} task={task} step={step} />
      )}
      <Button size="big" onClick={() => void opened.set({ [`tasks/${task.id}/parts/${mintId()}/quantity`]: '1' })}>
        Add a part
      </Button>
    </div>
  );
}

// A cover's seal and its screws share a hold point; a part asked for twice is entered once.
function withoutRepeats<T extends object>(records: readonly T[]): T[] {
  const seen = new Set<string>();
  return records.flatMap((record) => {
    const fresh = Object.entries(record).filter(([kind, key]) => !seen.has(`${kind} ${key}`));
    for (const [kind, key] of fresh) seen.add(`${kind} ${key}`);
    return fresh.length === 0 ? [] : [Object.fromEntries(fresh) as T];
  });
}

function FreeInspection({ task }: { task: string }) {
  const path = `tasks/${task}/inspections/found`;
  return (
    <DraftItem path={path} seed={{ subject: 'Found and done' }}>
      <DraftNotes path={`${path}/note`} label="Found and done" rows={4} />
    </DraftItem>
  );
}

function HoldPoints({ task }: { task: WorksheetTask }) {
  const { id } = useWorksheet();
  const { holdPoints } = procedureFor(task.key);
  if (holdPoints.length === 0) return null;
  return (
    <section aria-label="Hold points">
      <h2 className="mb-1 text-xl">Hold points</h2>
      <ol className="border-t border-line">
        {holdPoints.map((point, index) => {
          const doneAt = task.steps[point.key];
          return (
            <li key={point.key} className="border-b border-line">
              <a
                href={worksheetHash(id, task.id, point.key)}
                className="grid min-h-14 grid-cols-[2rem_minmax(0,1fr)_auto] items-center gap-3 py-2"
              >
                <span className="figure border-r-2 border-margin text-lg text-soft">{index + 1}</span>
                <span className="text-lg leading-tight font-medium">{point.title}</span>
                <span className={doneAt ? 'tag' : 'font-medium text-petrol underline underline-offset-4'}>
                  {doneAt ? `Done ${clockTime(doneAt)}` : 'Open'}
                </span>
              </a>
            </li>
          );
        })}
      </ol>
    </section>
  );
}
