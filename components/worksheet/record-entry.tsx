'use client';

import type { HoldPoint, Procedure } from '@/lib/domain/procedures';
import { FillEntry } from './fill-entry';
import { InspectionEntry } from './inspection-entry';
import { LevelCheckEntry } from './level-check-entry';
import { PartEntry } from './part-entry';
import { TorqueEntry } from './torque-entry';

interface RecordEntryProps {
  task: string;
  procedure: Procedure;
  records: NonNullable<HoldPoint['records']>;
  /** On a screen of its own a level check takes the top-ups it leads to; beside the fill they would stand twice. */
  isAlone?: boolean;
}

/** What a hold point asks to be entered. */
export function RecordEntry({ task, procedure, records, isAlone = false }: RecordEntryProps) {
  const { fill, torque, inspection, part, levelCheck } = records;
  const seen = procedure.inspections.find(({ subject }) => subject === inspection);
  const isFilled = procedure.holdPoints.some(({ records: one }) => one?.fill !== undefined && one.fill === levelCheck);
  return (
    <div className="space-y-6">
      {inspection === undefined ? null : (
        <InspectionEntry task={task} point={seen ?? { subject: inspection, kind: 'words' }} />
      )}
      {fill === undefined ? null : <FillEntry task={task} point={fill} />}
      {torque === undefined ? null : <TorqueEntry task={task} fastener={torque} />}
      {part === undefined ? null : <PartEntry task={task} part={part} />}
      {levelCheck === undefined ? null : <LevelCheckEntry task={task} point={levelCheck} />}
      {isAlone && levelCheck !== undefined && fill === undefined && isFilled ? (
        <FillEntry task={task} point={levelCheck} />
      ) : null}
    </div>
  );
}

/** What a procedure records that none of its hold points asks for. */
export function recordsBesideHoldPoints(procedure: Procedure): NonNullable<HoldPoint['records']>[] {
  const asked = procedure.holdPoints.map(({ records }) => records ?? {});
  const isAsked = (kind: keyof NonNullable<HoldPoint['records']>, key: string) =>
    asked.some((one) => one[kind] === key);
  return [
    ...procedure.fluidPoints.filter((key) => !isAsked('fill', key)).map((fill) => ({ fill })),
    ...procedure.inspections
      .filter(({ subject }) => !isAsked('inspection', subject))
      .map(({ subject }) => ({ inspection: subject })),
    ...procedure.fasteners.filter((key) => !isAsked('torque', key)).map((torque) => ({ torque })),
    ...procedure.parts.filter((key) => !isAsked('part', key)).map((part) => ({ part })),
    ...procedure.levelChecks.filter((key) => !isAsked('levelCheck', key)).map((levelCheck) => ({ levelCheck })),
  ];
}
