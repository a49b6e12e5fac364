import { DataRules } from '@/components/rule/data-rules';
import { Definition } from '@/components/ui/definition';
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
      <DataRules rules={rules} hrefOf={(item) => `${paths.schedule(machine)}#${itemAnchor(item)}`} />
      {rest.length === 0 ? null : (
        <Definition
          label="Due by neither distance nor date"
          items={rest.map(({ title, words, isDue }) => ({ term: title, detail: words, tone: isDue ? 'gap' : 'plain' }))}
        />
      )}
    </div>
  );
}
