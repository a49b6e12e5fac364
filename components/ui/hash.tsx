import { Fragment } from 'react';
import { CopyButton } from './copy-button';

export interface HashProps {
  value: string;
  /** "leaf hash", "SHA-256 of the file": names the copy button. */
  what?: string;
  isCopyable?: boolean;
  /** Only the first two groups, where the whole one stands elsewhere. */
  isShort?: boolean;
}

/** A hash in groups of eight. The gaps are margins, not characters: what is selected and copied is the bare value. */
export function Hash({ value, what = 'hash', isCopyable = true, isShort }: HashProps) {
  const groups = value.match(/.{1,8}/gu) ?? [];
  const shown = isShort ? groups.slice(0, 2) : groups;
  return (
    <span className="font-mono text-sm leading-relaxed">
      <bdi dir="ltr">
        {shown.map((group, index) => (
          <Fragment key={index}>
            <span className="mr-2 inline-block">{group}</span>
            <wbr />
          </Fragment>
        ))}
        {isShort && groups.length > 2 ? '…' : null}
      </bdi>
      {isCopyable && !isShort ? (
        <span className="font-text">
          <CopyButton text={value} what={what} />
        </span>
      ) : null}
    </span>
  );
}
