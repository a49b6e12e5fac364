import { Box, Boxes } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { formatLocalDate, isLocalDate } from '@/lib/domain/instants';
import { formatDistance, isUnitCode } from '@/lib/domain/units';

/** A member that is words: `reason` of a strike, `text` of an addendum, `why` of a disposal. */
const textMembers = { reason: 'Reason', text: 'What it adds', why: 'Why' } as const;

function member(body: unknown, name: string): unknown {
  return typeof body === 'object' && body !== null ? (body as Record<string, unknown>)[name] : undefined;
}

function odometerOf(body: unknown): string | undefined {
  const figure = member(body, 'odometer');
  const [value, unit] = [member(figure, 'value'), member(figure, 'unit')];
  return typeof value === 'string' && typeof unit === 'string' && isUnitCode(unit)
    ? formatDistance({ value, unit })
    : undefined;
}

/** Strikes, addenda, readings and handovers: what they say, each in its box. */
export function OtherEntry({ body }: { body: unknown }) {
  const odometer = odometerOf(body);
  const on = member(body, 'on');
  const texts = Object.entries(textMembers).flatMap(([name, label]) => {
    const text = member(body, name);
    return typeof text === 'string' ? [{ label, text }] : [];
  });
  if (odometer === undefined && texts.length === 0 && typeof on !== 'string') return null;
  return (
    <Boxes columns={2} isOneColumnOnPhone label="What it says">
      {odometer === undefined ? null : (
        <Box label="Odometer" isMeasure>
          {odometer}
        </Box>
      )}
      {typeof on === 'string' && isLocalDate(on) ? <Box label="On">{formatLocalDate(on)}</Box> : null}
      {texts.map(({ label, text }) => (
        <Box key={label} label={label} span="all">
          <UserText isMultiline>{text}</UserText>
        </Box>
      ))}
    </Boxes>
  );
}
