import { DataRules } from '@/components/rule/data-rules';
import type { RuleData } from '@/lib/services/bench-rule';

/** Where each item was done and where it falls due, as the owner sees it too; for reading, so nothing leads away. */
export function RecordRules({ rules }: { rules: RuleData[] }) {
  if (rules.length === 0) return null;
  return (
    <section aria-labelledby="rule" className="mt-8">
      <h2 id="rule" className="mb-3">
        What was done, and what falls due
      </h2>
      <div className="grid gap-4">
        <DataRules rules={rules} />
      </div>
    </section>
  );
}
