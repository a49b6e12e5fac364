import { SteelRule } from '@/components/rule/steel-rule';
import { Definition } from '@/components/ui/definition';
import { timeTicks } from '@/lib/domain/rule-ticks';
import { paths } from '@/lib/paths';
import type { RuleData } from '@/lib/services/bench-rule';
import type { DueLine } from '@/lib/services/what-is-due';

export interface DueRulesProps {
  machine: string;
  rules: RuleData[];
  due: DueLine[];
}

/** Where a schedule item stands on the schedule page. */
export const itemAnchor = (item: string): string => `item-${item}`;

/** What is due, on rules; what has a place on none is said in words. */
export function DueRules({ machine, rules, due }: DueRulesProps) {
  const drawn = new Set(rules.flatMap(({ lanes }) => lanes.map(({ item }) => item)));
  const rest = due.filter(({ item }) => !drawn.has(item));
  return (
    <div className="grid gap-4">
      {rules.map(({ label, unit, kind, from, to, now, lanes, flags }) => (
        <SteelRule
          key={label}
          label={label}
          unit={unit}
          from={from}
          to={to}
          now={now}
          ticks={kind === 'time' ? timeTicks(from, to) : undefined}
          flags={flags}
          lanes={lanes.map((lane) => ({
            label: lane.label,
            href: `${paths.schedule(machine)}#${itemAnchor(lane.item)}`,
            done: lane.done,
            limit: lane.limit,
            dueText: lane.dueText,
            isOver: lane.isOver,
          }))}
        />
      ))}
      {rest.length === 0 ? null : (
        <Definition
          label="Due by neither distance nor date"
          items={rest.map(({ title, words, isDue }) => ({ term: title, detail: words, tone: isDue ? 'gap' : 'plain' }))}
        />
      )}
    </div>
  );
}
