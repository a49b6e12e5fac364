import { Box, Boxes } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { formatLocalDate } from '@/lib/domain/instants';
import { formatDistance } from '@/lib/domain/units';
import type { OpeningBody } from '@/lib/evidence/format';

const whyWords: Record<OpeningBody['recordStarts']['why'], string> = {
  new: 'With the new machine',
  'bought-used': 'Bought used; earlier is before this record',
  'from-paper': 'Written up from paper',
  continues: 'Continues another record',
};

/** What a record opens with: the machine, its first use, and where the record begins. */
export function OpeningBoxes({ body }: { body: OpeningBody }) {
  const { make, model, modelYear, kindOfMachine, firstUse, recordStarts, continues } = body;
  return (
    <Boxes columns={3} isOneColumnOnPhone label="The machine">
      <Box label="Make and model" note={<UserText>{kindOfMachine}</UserText>}>
        <UserText>{[make, model].join(' ')}</UserText>
      </Box>
      <Box label="Model year">{modelYear ?? 'Not stated'}</Box>
      <Box label="First use" note={firstUse?.odometer && `at ${formatDistance(firstUse.odometer)}`}>
        {firstUse?.on === undefined ? 'Not known' : formatLocalDate(firstUse.on)}
      </Box>
      <Box
        label="Record starts"
        note={recordStarts.odometer && `at ${formatDistance(recordStarts.odometer)}`}
        span="all"
      >
        {formatLocalDate(recordStarts.on)}. {whyWords[recordStarts.why]}
      </Box>
      {continues === undefined ? null : (
        <Box label="Continues the record" span="all">
          <span className="font-mono text-sm break-all">{continues.log}</span>
        </Box>
      )}
    </Boxes>
  );
}
