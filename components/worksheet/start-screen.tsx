'use client';

import { useDraftInScreen } from '@/components/garage/draft-context';
import { DraftChoice, DraftFigure, DraftNotes, DraftText } from '@/components/garage/draft-fields';
import { Button } from '@/components/ui/button';
import { localDateOf, localTimeOf } from '@/lib/domain/instants';
import { formatDistance, unitsOf } from '@/lib/domain/units';
import { useWorksheet } from './worksheet-context';

/** Odometer, times and who did it: what every entry begins with. */
export function StartScreen() {
  const { machine, person, worksheet } = useWorksheet();
  const last = machine?.lastReading;
  const isUnknown = worksheet.odometer.unknownWhy !== undefined;
  return (
    <div className="space-y-6">
      {isUnknown && worksheet.odometer.value === undefined ? null : (
        <DraftFigure
          path="odometer/value"
          unitPath="odometer/unit"
          offered={unitsOf('distance')}
          {...(machine ? { usualUnit: machine.odometerUnit } : {})}
          label="Odometer"
          isWhole
          {...(last ? { hint: `Last reading ${formatDistance(last)}.` } : {})}
        />
      )}
      <details open={isUnknown}>
        <summary className="flex min-h-11 items-center font-medium text-petrol underline underline-offset-4">
          The odometer cannot be read
        </summary>
        <DraftText path="odometer/unknownWhy" label="Why it is not known" isOptional />
      </details>
      <Moment name="startedAt" label="Work begun" now="Begun now" />
      <Moment name="finishedAt" label="Work finished" now="Finished now" />
      {person ? (
        <DraftChoice
          path={`performedBy/${person.id}/capacity`}
          label="You did it as"
          options={[
            { value: 'owner', label: 'Owner' },
            { value: 'helper', label: 'Helper' },
          ]}
        />
      ) : null}
      <DraftChoice
        path="recorded"
        label="Written down"
        options={[
          { value: 'at-the-time', label: 'While doing it' },
          { value: 'from-paper', label: 'Later, from paper' },
        ]}
      />
      <DraftText path="title" label="Title" isOptional hint="Left empty, the entry is named by its tasks." />
      <DraftNotes path="notes" label="Notes" isOptional />
    </div>
  );
}

function Moment({ name, label, now }: { name: 'startedAt' | 'finishedAt'; label: string; now: string }) {
  const { opened, view } = useDraftInScreen();
  const zone = view.fields.zone ?? 'UTC';
  function setNow() {
    const instant = new Date().toISOString();
    void opened.set({ [`${name}/date`]: localDateOf(instant, zone), [`${name}/time`]: localTimeOf(instant, zone) });
  }
  return (
    <fieldset>
      <legend className="figure mb-2 text-xl">{label}</legend>
      <div className="grid grid-cols-2 gap-3 *:min-w-0">
        <DraftText path={`${name}/date`} label="Date" type="date" />
        <DraftText path={`${name}/time`} label="Time" type="time" isOptional />
      </div>
      <Button size="big" isWide className="mt-3" onClick={setNow}>
        {now}
      </Button>
      <p className="tag mt-1.5">Time zone {zone.replaceAll('_', ' ')}.</p>
    </fieldset>
  );
}
