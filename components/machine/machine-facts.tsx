import { OpeningBoxes } from '@/components/entry/opening-entry';
import { sourceWords } from '@/components/schedule/source-words';
import { Box, Boxes } from '@/components/ui/box';
import { Definition } from '@/components/ui/definition';
import { UserText } from '@/components/ui/user-text';
import { formatLocalDate, localDateOf } from '@/lib/domain/instants';
import type { MachineSettings } from '@/lib/services/read-machine-settings';

interface FactsProps {
  settings: MachineSettings;
}

/** What the machine is: its numbers and whether the VIN checks, then what its record opened with. */
export function MachineFacts({ settings }: FactsProps) {
  const { vin, frameNumber, engineNumber, timeZone } = settings.machine;
  return (
    <section aria-labelledby="identity">
      <h2 id="identity" className="sr-only">
        Identity
      </h2>
      <Boxes columns={4} isOneColumnOnPhone label="Identity">
        <Box
          label="VIN"
          span={2}
          note={
            settings.vinCheck === 'valid'
              ? 'Its check digit fits'
              : 'Check digit not checked: not required where it was made'
          }
        >
          <Number>{vin}</Number>
        </Box>
        <Box label="Frame number">
          <Number>{frameNumber}</Number>
        </Box>
        <Box label="Engine number">
          <Number>{engineNumber}</Number>
        </Box>
      </Boxes>
      <div className="-mt-px">
        <OpeningBoxes body={settings.opening} />
      </div>
      <p className="tag mt-2">Its times are shown in the time zone {timeZone}.</p>
    </section>
  );
}

function Number({ children }: { children: string | null }) {
  if (children === null || children === '') return <span className="text-soft">Not entered</span>;
  return (
    <bdi dir="ltr" className="break-all">
      {children}
    </bdi>
  );
}

export function WarrantyFacts({ settings: { warranty } }: FactsProps) {
  return (
    <section aria-labelledby="warranty">
      <h2 id="warranty" className="mb-2">
        Warranty
      </h2>
      {warranty.length === 0 ? (
        <p className="tag">No warranty is entered.</p>
      ) : (
        <Definition
          label="Warranty"
          items={warranty.map(({ title, sentence, startsOn, source }) => ({
            term: <UserText>{title}</UserText>,
            detail: (
              <>
                {sentence}
                <span className="tag block">
                  Starts {formatLocalDate(startsOn)}. <UserText>{sourceWords(source)}</UserText>
                </span>
              </>
            ),
          }))}
        />
      )}
    </section>
  );
}

const relationWords = {
  owner: 'owner: may seal and show the record to others',
  helper: 'helper: may fill in worksheets, never seals',
};

export function PeopleFacts({ settings: { people, machine } }: FactsProps) {
  return (
    <section aria-labelledby="people">
      <h2 id="people" className="mb-2">
        People
      </h2>
      <Definition
        label="People"
        items={people.map(({ name, relation, since }) => ({
          term: <UserText>{name}</UserText>,
          detail: `${relationWords[relation]}; since ${formatLocalDate(localDateOf(since, machine.timeZone))}`,
        }))}
      />
    </section>
  );
}

export function RecordFacts({ settings: { log } }: FactsProps) {
  return (
    <section aria-labelledby="record-log">
      <h2 id="record-log" className="mb-2">
        Record
      </h2>
      <Definition
        label="Record"
        items={[
          { term: 'Entries', detail: String(log.size) },
          { term: 'Log', detail: <span className="font-mono text-sm break-all">{log.log}</span> },
          { term: 'Origin', detail: <bdi>{log.origin}</bdi> },
          { term: 'Root', detail: <span className="font-mono text-sm break-all">{log.root}</span> },
          { term: 'Key fingerprint', detail: <span className="font-mono text-sm break-all">{log.fingerprint}</span> },
        ]}
      />
    </section>
  );
}
