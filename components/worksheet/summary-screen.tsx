'use client';

import { photosOf } from '@/components/garage/photos-of';
import { useDraftInScreen } from '@/components/garage/draft-context';
import { worksheetHash } from '@/components/garage/place';
import { Notice } from '@/components/ui/notice';
import { formatLocalDate, isLocalDate } from '@/lib/domain/instants';
import { formatAmount, formatDistance, parseNumber } from '@/lib/domain/units';
import type { WorksheetTask } from '@/lib/domain/worksheet';
import { Box, Boxes } from '@/components/ui/box';
import { fillTotal, readAmount } from './fill-figures';
import { MoveOrDiscard } from './move-or-discard';
import { progressWords, taskProgress, taskTitle } from './task-fields';
import { useWorksheet } from './worksheet-context';

/** What is there and what is missing. What keeps it from being sealed links to where it is mended. */
export function SummaryScreen() {
  const { id, worksheet, machine } = useWorksheet();
  const { view, problems } = useDraftInScreen();
  const { odometer, startedAt, finishedAt } = worksheet;
  const value = odometer.value === undefined ? undefined : parseNumber(odometer.value);
  const photos = photosOf(view);
  const entries = Object.entries(problems);
  return (
    <div className="space-y-6">
      {machine?.relation === 'helper' ? (
        <Notice title="An owner seals">
          You can fill in everything; an owner of the machine reviews and seals it.
        </Notice>
      ) : null}
      <section aria-label="Missing">
        <h2 className="mb-1 text-xl">
          {entries.length === 0 ? 'Nothing is missing to seal it' : 'Missing before it can be sealed'}
        </h2>
        <ul className="border-t border-line">
          {entries.map(([field, sentence]) => (
            <li key={field} className="border-b border-line">
              <a
                href={worksheetHash(id, screenOf(field))}
                className="flex min-h-14 items-center py-2 text-lg leading-snug text-gap underline underline-offset-4"
              >
                {sentence}
              </a>
            </li>
          ))}
        </ul>
      </section>
      <Boxes columns={3} label="Worksheet">
        <Box label="Odometer" isMeasure>
          {value?.ok && odometer.unit ? formatDistance({ value: value.amount, unit: odometer.unit }) : 'Not entered'}
        </Box>
        <Box label="Begun">{momentWords(startedAt)}</Box>
        <Box label="Finished">{momentWords(finishedAt)}</Box>
      </Boxes>
      {worksheet.tasks.map((task) => (
        <TaskSummary key={task.id} task={task} />
      ))}
      <p className="tag">
        {photos.length === 0 ? 'No photo.' : `${photos.length} ${photos.length === 1 ? 'photo' : 'photos'}.`} What is
        left out stays out: gaps do not stop the seal, they are sealed as they are.
      </p>
      <MoveOrDiscard />
    </div>
  );
}

function momentWords({ date, time }: { date?: string; time?: string }): string {
  if (date === undefined || !isLocalDate(date)) return 'Not entered';
  return time === undefined ? formatLocalDate(date) : `${formatLocalDate(date)}, ${time}`;
}

function screenOf(field: string): string {
  const [first = '', second = ''] = field.split('/');
  if (first === 'tasks') return second === '' ? 'tasks' : second;
  return first === 'photos' ? 'photos' : 'start';
}

function TaskSummary({ task }: { task: WorksheetTask }) {
  const { id, machine } = useWorksheet();
  const { done, all } = taskProgress(task);
  const fills = task.fills.flatMap((fill) => {
    const total = fillTotal(fill.amounts);
    return total ? [{ id: fill.id, title: fill.point ?? 'Fill', total }] : [];
  });
  const torques = task.torques.flatMap((torque) => {
    const amount = readAmount(torque);
    return amount ? [{ id: torque.id, amount }] : [];
  });
  const titleOfFastener = (key: string) =>
    machine?.terms?.fasteners.find(({ fastener }) => fastener === key)?.title ?? key;
  const titleOfPoint = (key: string) => machine?.terms?.fluidPoints.find(({ point }) => point === key)?.title ?? key;
  return (
    <section aria-label={taskTitle(task)}>
      <a href={worksheetHash(id, task.id)} className="flex min-h-14 items-center justify-between gap-4">
        <h3 className="underline underline-offset-4">{taskTitle(task)}</h3>
        <span className={done < all ? 'tone-warn text-[0.9375rem]' : 'tag'}>{progressWords(task)}</span>
      </a>
      {fills.length + torques.length > 0 ? (
        <Boxes columns={3}>
          {fills.map((fill) => (
            <Box key={fill.id} label={`${titleOfPoint(fill.title)}, filled`} isMeasure>
              {formatAmount(fill.total)}
            </Box>
          ))}
          {torques.map((torque) => (
            <Box key={torque.id} label={titleOfFastener(torque.id)} isMeasure>
              {formatAmount(torque.amount)}
            </Box>
          ))}
        </Boxes>
      ) : null}
    </section>
  );
}
