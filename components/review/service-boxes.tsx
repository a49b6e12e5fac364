import { metricWords } from '@/components/entry/words';
import { Box, Boxes } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { formatLocalDate, formatLocalMoment } from '@/lib/domain/instants';
import { formatAmount, formatDistance, readableAmount, sumAmounts } from '@/lib/domain/units';
import type { Draw, Fill, LocalMoment, ServiceBody } from '@/lib/evidence/format';

/** `4.25 + 0.25 US qt`; amounts of several units are each given theirs. */
function fillWords({ amounts }: Fill): string {
  const [first] = amounts;
  if (first === undefined) return 'Nothing entered';
  if (amounts.some(({ unit }) => unit !== first.unit)) return amounts.map(formatAmount).join(' + ');
  return formatAmount({ amount: amounts.map(({ amount }) => amount).join(' + '), unit: first.unit });
}

export function drawWords(draw: Draw): string {
  const left = draw.balanceAfter.amount === '0' ? 'nothing' : readableAmount(draw.balanceAfter);
  return `${readableAmount(draw)} from receipt ${draw.purchase.seq}, line ${draw.line}, bought ${formatLocalDate(draw.boughtOn)}; ${left} left`;
}

function fillNotes(fill: Fill): string[] {
  const sum = fill.amounts.length === 0 ? undefined : sumAmounts(fill.amounts);
  const isMixed = new Set(fill.amounts.map(({ unit }) => unit)).size > 1;
  const parts = [
    sum === undefined || !isMixed ? undefined : `together ${formatAmount(sum)}`,
    sum && metricWords(sum),
    fill.specification === undefined ? undefined : `specified ${fill.specification.map(formatAmount).join(' / ')}`,
    ...fill.draws.map(drawWords),
    fill.uncovered === undefined ? undefined : `${formatAmount(fill.uncovered)} without a receipt`,
  ];
  return parts.filter((part) => part !== undefined);
}

function workDone({ startedAt, finishedAt }: ServiceBody): string {
  const plainTime = (moment: LocalMoment) => moment.time ?? '';
  if (startedAt === undefined) return formatLocalMoment(finishedAt);
  if (startedAt.date !== finishedAt.date) {
    return `${formatLocalMoment(startedAt)} to ${formatLocalMoment(finishedAt)}`;
  }
  if (finishedAt.time === undefined) return formatLocalMoment(startedAt);
  return startedAt.time === undefined
    ? formatLocalMoment(finishedAt)
    : `${formatLocalMoment(startedAt)} to ${plainTime(finishedAt)}`;
}

/** The measurements of an entry: when, at which odometer, what went in and how much. */
export function ServiceBoxes({ body }: { body: ServiceBody }) {
  const fills = body.tasks.flatMap((task) => task.fills);
  return (
    <Boxes columns={3} isOneColumnOnPhone label="The work">
      <Box label="Work done" note={`Time zone ${body.finishedAt.zone}`}>
        {workDone(body)}
      </Box>
      {body.odometer === undefined ? (
        <Box label="Odometer" tone="warn">
          Not known: <UserText>{body.odometerUnknown?.why ?? ''}</UserText>
        </Box>
      ) : (
        <Box
          label="Odometer"
          isMeasure
          note={body.odometer.instrument > 0 ? `instrument ${body.odometer.instrument + 1}` : undefined}
        >
          {formatDistance(body.odometer)}
        </Box>
      )}
      <Box label="Done by">
        {body.performedBy.map(({ person, capacity }) => (
          <span key={`${person} ${capacity}`} className="block">
            <UserText>{person}</UserText>, {capacity}
          </span>
        ))}
      </Box>
      {body.engineHours === undefined ? null : (
        <Box label="Engine hours" isMeasure>
          {formatAmount({ amount: body.engineHours, unit: 'h' })}
        </Box>
      )}
      {body.workOrder === undefined ? null : (
        <Box label="Work order">
          <UserText>{body.workOrder}</UserText>
        </Box>
      )}
      {fills.map((fill, index) => (
        <Box
          key={index}
          label={`${fill.pointTitle}, ${fill.fillKind} fill`}
          isMeasure
          note={
            <>
              {fill.product === undefined ? null : (
                <span className="block">
                  <UserText>{[fill.product, fill.grade].filter(Boolean).join(', ')}</UserText>
                </span>
              )}
              {fillNotes(fill).map((note) => (
                <span key={note} className="block">
                  {note}
                </span>
              ))}
            </>
          }
        >
          {fillWords(fill)}
        </Box>
      ))}
    </Boxes>
  );
}
