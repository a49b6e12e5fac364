import { Definition } from '@/components/ui/definition';
import { checkTitle } from '@/lib/domain/checks';
import type { Check, CheckResult } from '@/lib/evidence/format';

const words: Record<CheckResult, string> = { met: 'Met', gap: 'Gap', 'not-applicable': 'Does not apply' };

/** The questions a sceptical reader will ask, each answered or named as a gap. `href` leads to where gaps are mended. */
export function ReaderChecks({ checks, href }: { checks: Check[]; href?: string }) {
  const hasGap = checks.some(({ result }) => result === 'gap');
  return (
    <section className="mt-8">
      <h2 className="mb-2">Reader’s checks</h2>
      <Definition
        label="Reader’s checks"
        items={checks.map(({ key, result, detail }) => ({
          term: checkTitle(key),
          tone: result === 'gap' ? 'gap' : 'plain',
          detail: (
            <>
              <b>{words[result]}.</b> {detail}
            </>
          ),
        }))}
      />
      {hasGap && href !== undefined ? (
        <p className="tag mt-3 max-w-[70ch]">
          A gap can be mended on{' '}
          <a className="link" href={href}>
            the worksheet
          </a>{' '}
          first, or left standing: it is then part of the entry, and a later addendum can still add what is missing.
        </p>
      ) : null}
    </section>
  );
}
