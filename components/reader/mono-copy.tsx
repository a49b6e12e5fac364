import { CopyButton } from '@/components/ui/copy-button';

export interface MonoCopyProps {
  text: string;
  /** What it is, for the copy button: "verifier key". */
  what: string;
}

/** A text for machines that is copied whole: a key, a command. It breaks anywhere rather than run out of its box. */
export function MonoCopy({ text, what }: MonoCopyProps) {
  return (
    <span className="font-mono text-sm leading-relaxed">
      <bdi dir="ltr" className="break-all">
        {text}
      </bdi>{' '}
      <span className="font-text">
        <CopyButton text={text} what={what} />
      </span>
    </span>
  );
}
