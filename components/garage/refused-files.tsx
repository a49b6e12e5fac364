import { Notice } from '@/components/ui/notice';
import { UserText } from '@/components/ui/user-text';
import type { RefusedFile } from './use-add-photos';

export function RefusedFiles({ refused }: { refused: readonly RefusedFile[] }) {
  if (refused.length === 0) return null;
  return (
    <div className="mt-3">
      <Notice tone="gap" title="Not added" isLive>
        <ul className="space-y-1">
          {refused.map(({ name, why }, index) => (
            <li key={`${index} ${name}`} className="break-words">
              <UserText>{name}</UserText> {why}
            </li>
          ))}
        </ul>
      </Notice>
    </div>
  );
}
