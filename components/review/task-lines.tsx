import { Definition, type DefinitionItem } from '@/components/ui/definition';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import { formatBand } from '@/lib/domain/torque';
import { formatAmount } from '@/lib/domain/units';
import type { PartUse, Task, Torque } from '@/lib/evidence/format';
import { drawWords } from './service-boxes';

function torqueWords({ specification, tool }: Torque): string {
  const band = specification?.map(formatBand).join(' / ');
  const calibrated = tool?.calibratedOn === undefined ? '' : `, calibrated ${tool.calibratedOn}`;
  return [band && `specified ${band}`, tool && `${tool.name}${calibrated}`].filter(Boolean).join('; ');
}

function partWords({ partNumber, draws, uncovered }: PartUse): string {
  const parts = [partNumber, ...draws.map(drawWords), uncovered && `${formatAmount(uncovered)} without a receipt`];
  return parts.filter(Boolean).join('; ');
}

function itemsOf(task: Task, zone: string): DefinitionItem[] {
  return [
    ...task.torques.map((torque) => ({
      term: torque.fastenerTitle,
      detail: (
        <>
          <b>{formatAmount(torque)}</b> <span className="tag">{torqueWords(torque)}</span>
        </>
      ),
    })),
    ...task.inspections.map((inspection) => ({
      term: inspection.subject,
      detail: <UserText isMultiline>{[inspection.grade, inspection.note].filter(Boolean).join(': ')}</UserText>,
    })),
    ...task.parts.map((part) => ({
      term: part.name,
      detail: (
        <>
          {formatAmount({ amount: part.quantity, unit: '{piece}' })} <span className="tag">{partWords(part)}</span>
        </>
      ),
    })),
    ...task.levelChecks.map((check) => ({
      term: `${check.pointTitle}, level`,
      detail: (
        <>
          <UserText>{check.reading}</UserText>{' '}
          <span className="tag">{[check.position, check.temperature].filter(Boolean).join(', ')}</span>
        </>
      ),
    })),
    ...task.steps.map((step) => ({
      term: step.title,
      detail: step.doneAt === undefined ? 'done' : `done ${formatInstant(step.doneAt, zone)}`,
    })),
  ];
}

/** What each task says beyond its fills, line by line. */
export function TaskLines({ tasks, zone }: { tasks: Task[]; zone: string }) {
  return tasks.map((task, index) => (
    <section key={index} className="mt-6">
      <h3 className="mb-2">
        <UserText>{task.title}</UserText>
      </h3>
      {itemsOf(task, zone).length === 0 ? (
        <p className="tag">Nothing more is said about it.</p>
      ) : (
        <Definition items={itemsOf(task, zone)} label={task.title} />
      )}
    </section>
  ));
}
