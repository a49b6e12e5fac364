'use client';

import { ShortRule } from '@/components/rule/short-rule';
import { fillTolerancePercent } from '@/lib/domain/checks';
import type { Amount, FluidPoint } from '@/lib/evidence/format';
import { formatAmount, formatConverted, units } from '@/lib/domain/units';
import type { WorksheetFill } from '@/lib/domain/worksheet';
import { companionUnit, drawnFigure, judgeFill, readAmount, ruleEnd, specifiedFor } from './fill-figures';

interface FillTotalProps {
  fill: WorksheetFill | undefined;
  spec: FluidPoint | undefined;
  total: Amount | undefined;
}

/** The running total, large once there are several amounts, over the rule with what is specified. */
export function FillTotal({ fill, spec, total }: FillTotalProps) {
  const kind = fill?.fillKind ?? (spec?.wetFill || !spec?.dryFill ? 'wet' : 'dry');
  const printed = (kind === 'dry' ? spec?.dryFill : spec?.wetFill) ?? [];
  const specified = total ? specifiedFor(spec, kind, total.unit) : printed[0];
  // With one amount the figure stands right above, as typed.
  const isSum = (fill?.amounts ?? []).flatMap((amount) => readAmount(amount) ?? []).length > 1;
  return (
    <div>
      {total && isSum ? (
        <p className="flex items-baseline gap-2 border-b border-ink pb-1" aria-live="polite">
          <span className="label mr-auto">Filled, {kind} fill, so far</span>
          <span className="figure text-[2.75rem]">{total.amount}</span>
          <span className="text-2xl text-soft">{units[total.unit].label}</span>
        </p>
      ) : null}
      {specified ? <FillRule total={total} specified={specified} /> : null}
      {total && !specified ? (
        <p className="tag mt-1.5">
          {formatConverted(total.amount, total.unit, companionUnit(total.unit))}. The spec sheet has no capacity for it.
        </p>
      ) : null}
    </div>
  );
}

const judgements = {
  'as specified': 'as specified',
  near: `within ${fillTolerancePercent} % of it`,
  more: 'more than specified',
  less: 'less than specified so far',
};

function FillRule({ total, specified }: { total: Amount | undefined; specified: Amount }) {
  const { unit } = specified;
  const full = drawnFigure(specified, unit);
  const value = total && drawnFigure(total, unit);
  const words = `specified ${formatAmount(specified)}`;
  const result = total && judgeFill(total, specified);
  const judged = result ? judgements[result] : '';
  const margin = (full * fillTolerancePercent) / 100;
  return (
    <ShortRule
      from={0}
      to={ruleEnd(full, value)}
      band={{ min: full - margin, max: full + margin }}
      {...(value === undefined ? {} : { value })}
      isMet={result === 'as specified' || result === 'near'}
      bandText={words}
      {...(total
        ? { valueText: `${formatConverted(total.amount, total.unit, companionUnit(total.unit))}, ${judged}` }
        : {})}
      title={total ? `${formatAmount(total)}, ${judged}: ${words}` : `Nothing filled yet, ${words}`}
    />
  );
}
