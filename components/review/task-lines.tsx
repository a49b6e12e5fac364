import { metricWords } from '@/components/entry/words';
import { Definition, type DefinitionItem } from '@/components/ui/definition';
import { UserText } from '@/components/ui/user-text';
import { formatInstant, formatLocalDate } from '@/lib/domain/instants';
import { debrisGrades } from '@/lib/domain/procedures';
import { formatBand } from '@/lib/domain/torque';
import { formatAmount } from '@/lib/domain/units';
import type { Inspection, PartUse, Task, Torque } from '@/lib/evidence/format';
import { drawWords } from './service-boxes';

function torqueWords({ specification, tool, ...torque }: Torque): string {
  const band = specification?.map(formatBand).join(' / ');
  const calibrated =
    tool?.calibratedOn === undefined ? '' : `, calibrated ${formatLocalDate(tool.calibratedOn.slice(0, 10))}`;
  return [metricWords(torque), band && `specified ${band}`, tool && `${tool.name}${calibrated}`]
    .filter(Boolean)
    .join('; ');
}

function partWords({ partNumber, draws, uncovered }: PartUse): string {
  const parts = [partNumber, ...draws.map(drawWords), uncovered && `${formatAmount(uncovered)} without a receipt`];
  return parts.filter(Boolean).join('; ');
}

function foundWords({ grade, note }: Inspection): string {
  const debris = debrisGrades.find((one) => one.grade === grade);
  const shown = debris === undefined ? grade : `${debris.grade}, ${debris.title.toLowerCase()}`;
  return [shown, note].filter(Boolean).join(': ');
}

function itemsOf(task: Task): DefinitionItem[] {
  return [
    ...task.torques.map((torque) => ({
      term: torque.fastenerTitle,
      detail: (
        <>
          <b>{formatAmount(torque)}</b> <span className="tag block">{torqueWords(torque)}</span>
        </>
      ),
    })),
    ...task.inspections.map((inspection) => ({
      term: inspection.subject,
      detail: <UserText isMultiline>{foundWords(inspection)}</UserText>,
    })),
    ...task.parts.map((part) => ({
      term: part.name,
      detail: (
        <>
          {formatAmount({ amount: part.quantity, unit: '{piece}' })}
          <span className="tag block">
            <UserText>{partWords(part)}</UserText>
          </span>
        </>
      ),
    })),
    ...task.levelChecks.map((check) => ({
      term: `${check.pointTitle}, level`,
      detail: (
        <>
          <UserText>{check.reading}</UserText>
          <span className="tag block">{[check.position, check.temperature].filter(Boolean).join(', ')}</span>
        </>
      ),
    })),
  ];
}

/** Hold points as they were ticked. One that was not is no proof that it was left out, and is not called done. */
function HoldPoints({ steps, zone }: { steps: Task['steps']; zone: string }) {
  const ticked = steps.filter(({ doneAt }) => doneAt !== undefined).length;
  return (
    <>
      <p className="label mt-4">
        Hold points, {ticked} of {steps.length} ticked
      </p>
      <ul className="mt-1 gap-x-8 sm:columns-2">
        {steps.map(({ key, title, doneAt }) => (
          <li key={key} className="flex justify-between gap-3 py-0.5 break-inside-avoid">
            <span>{title}</span>
            <span className="tag shrink-0 tabular-nums">
              {doneAt === undefined ? 'not ticked' : formatInstant(doneAt, zone)}
            </span>
          </li>
        ))}
      </ul>
    </>
  );
}

/** What each task says beyond its fills, line by line. */
export function TaskLines({ tasks, zone }: { tasks: Task[]; zone: string }) {
  return tasks.map((task, index) => {
    const items = itemsOf(task);
    return (
      <section key={index} className="mt-6">
        <h3 className="mb-2">
          <UserText>{task.title}</UserText>
        </h3>
        {items.length > 0 ? <Definition items={items} label={task.title} /> : null}
        {task.steps.length > 0 ? <HoldPoints steps={task.steps} zone={zone} /> : null}
        {items.length + task.steps.length + task.fills.length === 0 ? (
          <p className="tag">Nothing more is said about it.</p>
        ) : null}
      </section>
    );
  });
}
