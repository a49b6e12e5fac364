'use client';

import { DraftItem } from '@/components/garage/draft-context';
import { DraftText } from '@/components/garage/draft-fields';
import { useWorksheet } from './worksheet-context';

/** A level reading says little without the position and temperature it was read in. */
export function LevelCheckEntry({ task, point }: { task: string; point: string }) {
  const { machine } = useWorksheet();
  const spec = machine?.terms?.fluidPoints.find((one) => one.point === point);
  const path = `tasks/${task}/levelChecks/${point}`;
  return (
    <DraftItem path={path} seed={{ point }}>
      <fieldset className="space-y-3">
        <legend className="figure mb-2 text-xl">{spec?.title ?? 'Level'}, level</legend>
        <DraftText path={`${path}/reading`} label="What it showed" placeholder="between the marks" />
        <DraftText
          path={`${path}/position`}
          label="Position"
          isOptional
          {...(spec?.levelPosition ? { hint: `Specified: ${spec.levelPosition}.` } : {})}
        />
        <DraftText
          path={`${path}/temperature`}
          label="Temperature"
          isOptional
          {...(spec?.levelTemperature ? { hint: `Specified: ${spec.levelTemperature}.` } : {})}
        />
      </fieldset>
    </DraftItem>
  );
}
