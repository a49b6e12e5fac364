import { Definition } from '@/components/ui/definition';
import { UserText } from '@/components/ui/user-text';
import type { WarrantyState } from '@/lib/domain/warranty';

/** Both limits of every warranty in words, for those whose end lies beyond the rule. */
export function WarrantyLines({ warranty }: { warranty: WarrantyState[] }) {
  if (warranty.length === 0) return null;
  return (
    <section aria-labelledby="warranty" className="mt-8">
      <h2 id="warranty" className="mb-2">
        Warranty
      </h2>
      <Definition
        label="Warranty"
        items={warranty.map(({ title, sentence }) => ({ term: <UserText>{title}</UserText>, detail: sentence }))}
      />
      <p className="tag mt-2">The warranty’s own text decides; this only counts.</p>
    </section>
  );
}
