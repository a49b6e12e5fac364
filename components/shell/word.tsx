import Link from 'next/link';
import { WitnessMark } from '@/components/mark/witness-mark';

/** The word with its mark; the product's only emblem. */
export function Word({ href, size = 'plain' }: { href: string; size?: 'plain' | 'small' }) {
  return (
    <Link href={href} className="inline-flex min-h-11 items-center gap-2.5">
      <WitnessMark state="sealed" title={null} size={size === 'small' ? 24 : 32} />
      <span className={size === 'small' ? 'figure text-xl' : 'figure text-[1.625rem]'}>Witnessmark</span>
    </Link>
  );
}
