import { Notice } from '@/components/ui/notice';

/** What erasing reaches and what it cannot, said before anything is done. */
export function EraseReach({ where }: { where: 'entry' | 'line' }) {
  return (
    <Notice tone="warn" title="This cannot be taken back">
      <ul className="mt-1 grid list-disc gap-1.5 pl-5">
        <li>
          The part is destroyed here for good: in the record, in what was typed before it was sealed, and its files if
          nothing else uses them. The {where} keeps the part’s name and digest, so the record still verifies.
        </li>
        <li>A new {where} says which part was erased and when, without its content. Every reader sees it.</li>
        <li>
          Not reached: backups made before, packets and files that were built or downloaded before, mails that were
          sent, what people or their devices hold. The account of a person stays as it is.
        </li>
      </ul>
    </Notice>
  );
}
