import { Fragment } from 'react';

const link = /(https?:\/\/[^\s<>"]+)/;

/** The plain text of a mail. Only http addresses become links; nothing in it is ever markup. */
export function MailText({ text }: { text: string }) {
  return (
    <p className="break-words whitespace-pre-wrap">
      {text.split(link).map((part, index) =>
        link.test(part) ? (
          <a key={index} href={part} rel="noreferrer" className="link break-all">
            {part}
          </a>
        ) : (
          <Fragment key={index}>{part}</Fragment>
        ),
      )}
    </p>
  );
}
