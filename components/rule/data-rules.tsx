import { timeTicks } from '@/lib/domain/rule-ticks';
import type { RuleData } from '@/lib/services/bench-rule';
import { SteelRule } from './steel-rule';

export interface DataRulesProps {
  rules: RuleData[];
  /** Where a lane's name leads; absent: nowhere. */
  hrefOf?: (item: string) => string;
}

/** The rules in distance and in time, as bench and reader see them alike. */
export function DataRules({ rules, hrefOf }: DataRulesProps) {
  return rules.map(({ label, unit, kind, from, to, now, lanes, flags }) => (
    <SteelRule
      key={label}
      label={label}
      unit={unit}
      from={from}
      to={to}
      now={now}
      ticks={kind === 'time' ? timeTicks(from, to) : undefined}
      flags={flags}
      lanes={lanes.map(({ item, label: title, done, limit, dueText, isOver }) => ({
        label: title,
        ...(hrefOf === undefined ? {} : { href: hrefOf(item) }),
        done,
        limit,
        dueText,
        isOver,
      }))}
    />
  ));
}
