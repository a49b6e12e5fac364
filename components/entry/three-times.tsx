import { Box, Boxes } from '@/components/ui/box';
import { describeDelay, formatInstant, formatLocalMoment } from '@/lib/domain/instants';
import type { LocalMoment } from '@/lib/evidence/format';
import type { TokenView } from '@/lib/services/record-view';
import { provenWords } from './words';

export interface ThreeTimesProps {
  /** What the author says; absent where an entry claims no moment of its own. */
  claimed?: LocalMoment | undefined;
  claimedLabel?: string;
  sealedAt: string;
  tokens: TokenView[];
  zone: string;
}

/** What is claimed, what this installation's clock says, and what anybody else can confirm. */
export function ThreeTimes({ claimed, claimedLabel = 'Claimed', sealedAt, tokens, zone }: ThreeTimesProps) {
  const proven = provenWords(tokens, { zone, sealedAt });
  return (
    <Boxes columns={claimed === undefined ? 2 : 3} isOneColumnOnPhone label="Three times">
      {claimed === undefined ? null : (
        <Box label={claimedLabel} note="The author’s word">
          {formatLocalMoment(claimed)}
        </Box>
      )}
      <Box
        label="Sealed"
        note={
          claimed === undefined
            ? 'By this installation’s clock'
            : `${capitalised(describeDelay(claimed, sealedAt))}, by this installation’s clock`
        }
      >
        {formatInstant(sealedAt, zone)}
      </Box>
      <Box label="Proven" note={proven.note} tone={proven.isProven ? 'plain' : 'warn'}>
        {proven.words}
      </Box>
    </Boxes>
  );
}

const capitalised = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);
