import type { ReactNode } from 'react';
import { UserText } from '@/components/ui/user-text';
import { cut } from './cut';

export interface PlainItem {
  text: string;
  /** Where: “Entry 7, Engine oil”. */
  where?: string;
  technical?: string;
}

/** A section of sentences with a line between them; nothing at all without items. */
export function PlainList({ title, items, children }: { title: string; items: PlainItem[]; children?: ReactNode }) {
  if (items.length === 0) return null;
  return (
    <section className="mt-6">
      <h3 className="mb-2">{title}</h3>
      <ul className="max-w-[80ch] divide-y divide-line border-y border-line">
        {items.map(({ text, where, technical }, index) => (
          <li key={index} className="kept-together py-2.5">
            {where === undefined ? null : (
              <span className="text-soft">
                <UserText>{cut(where)}</UserText>:{' '}
              </span>
            )}
            <UserText>{cut(text)}</UserText>
            {technical === undefined ? null : (
              <span className="block font-mono text-sm break-all whitespace-pre-line text-soft">
                <bdi>{cut(technical)}</bdi>
              </span>
            )}
          </li>
        ))}
      </ul>
      {children}
    </section>
  );
}
