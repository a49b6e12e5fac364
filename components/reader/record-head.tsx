import { Box, Boxes } from '@/components/ui/box';
import { Hash } from '@/components/ui/hash';
import { UserText } from '@/components/ui/user-text';
import { counted } from '@/components/entry/words';
import { formatInstant, formatLocalDate } from '@/lib/domain/instants';
import { missingWord } from '@/lib/domain/record-words';
import { formatDistance } from '@/lib/domain/units';
import type { OpeningBody } from '@/lib/evidence/format';
import type { Shown } from '@/lib/services/read-viewing';

const whyWords: Record<OpeningBody['recordStarts']['why'], string> = {
  new: 'bought new',
  'bought-used': 'bought used; what came before is not known',
  'from-paper': 'earlier history recorded later, from paper',
  continues: 'continued from another record',
};

function startWords({ recordStarts, firstUse }: OpeningBody): string {
  const at = recordStarts.odometer === undefined ? '' : ` at ${formatDistance(recordStarts.odometer)}`;
  const used = firstUse?.on === undefined ? '' : `. First used ${formatLocalDate(firstUse.on)}`;
  return `${formatLocalDate(recordStarts.on)}${at}, ${whyWords[recordStarts.why]}${used}`;
}

type Opened = Shown['summary']['opened'];

/** Every line is there; what is kept back from this reader is counted. */
function withheldWords({ partsWithheld, partsErased }: Opened): string {
  const erased = partsErased === 0 ? '' : `, ${counted(partsErased, 'part', 'parts')} erased`;
  return `${counted(partsWithheld, 'part', 'parts')} withheld${erased}`;
}

/** Of a partial view nobody may take “1 of 1” for the whole record. */
const servicesWords = ({ unjudged }: Opened): string =>
  unjudged === 0 ? 'services that stand' : 'services opened here';

const readWords = (on: string, { unjudged }: Opened): string =>
  `read ${formatLocalDate(on)}${unjudged === 0 ? '' : '; later ones may be withheld'}`;

/** Which machine, how far the record goes, and the figures by which anybody can recognise it later. */
export function RecordHead({ shown }: { shown: Shown }) {
  const { record, summary, zone, readAt } = shown;
  const { identity, log, machine, opening } = record;
  const { counts, now, opened } = summary;
  return (
    <Boxes columns={4} label="The record">
      <Box label="Machine" span={2} note={<UserText>{machine.kind}</UserText>}>
        <UserText>{machine.name}</UserText>
      </Box>
      <Box label={identity?.vin === undefined && identity !== null ? 'Frame number' : 'VIN'} span={2}>
        <span className="font-mono text-base">
          <UserText>{identity?.vin ?? identity?.frameNumber ?? missingWord('identity', record.entries[0])}</UserText>
        </span>
      </Box>
      <Box label="Odometer" isMeasure note={now === undefined ? undefined : readWords(now.on, opened)}>
        {now === undefined ? 'No reading' : formatDistance(now)}
      </Box>
      <Box label="Entries opened" isMeasure note={withheldWords(opened)}>
        {counts.entries}
      </Box>
      <Box label="Sealed within 7 days" isMeasure note={`of the work, ${servicesWords(opened)}`}>
        {counts.prompt}
      </Box>
      <Box label="Countersigned" isMeasure note={`by a shop, ${servicesWords(opened)}`}>
        {counts.countersigned}
      </Box>
      <Box label="Where the record starts" span={2}>
        <span className="text-base font-normal">{startWords(opening)}</span>
      </Box>
      <Box
        label="Independent time stamps"
        span={2}
        note={counts.proven === 'none' ? 'The times are this installation’s own word.' : undefined}
      >
        {counts.proven === 'none' ? 'None' : counts.proven}
      </Box>
      <Box
        label={`Root of the record at size ${log.size}`}
        span="all"
        note={`Read ${formatInstant(readAt, zone)}, ${zone}`}
      >
        <Hash value={log.root} what="root" />
      </Box>
    </Boxes>
  );
}
