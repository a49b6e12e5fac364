'use client';

import { DraftItem, useDraftField } from '@/components/garage/draft-context';
import { DraftChoice, DraftNotes } from '@/components/garage/draft-fields';
import { debrisGrades, type InspectionPoint } from '@/lib/domain/procedures';
import { DebrisFigure } from './debris-figure';
import { itemId } from './item-id';

/** What was found where somebody looked: a drawn grade for debris, words for the rest. */
export function InspectionEntry({ task, point }: { task: string; point: InspectionPoint }) {
  const path = `tasks/${task}/inspections/${itemId(point.subject)}`;
  const grade = useDraftField(`${path}/grade`).value;
  const chosen = debrisGrades.find((one) => one.grade === grade);
  return (
    <DraftItem path={path} seed={{ subject: point.subject }}>
      {point.kind === 'debris' ? (
        <DraftChoice
          path={`${path}/grade`}
          label={point.subject}
          hint={chosen?.text ?? 'What is on it before it is wiped.'}
          options={debrisGrades.map(({ grade: value, title }) => ({
            value,
            label: <span className="-mx-2 text-base whitespace-nowrap">{title}</span>,
            picture: <DebrisFigure grade={value} />,
          }))}
        />
      ) : null}
      <DraftNotes
        path={`${path}/note`}
        label={point.kind === 'debris' ? 'Seen besides' : point.subject}
        rows={2}
        isOptional={point.kind === 'debris'}
        className="mt-3"
      />
    </DraftItem>
  );
}
