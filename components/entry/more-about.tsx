import { LinkButton } from '@/components/ui/button';

/** What is seldom wanted, out of the way of a thumb. */
export function MoreAbout({ eraseHref, name }: { eraseHref: string; name: string }) {
  return (
    <details className="not-printed mt-8">
      <summary className="link inline-flex min-h-11 items-center">More</summary>
      <p className="tag mt-1 mb-3 max-w-[70ch]">
        A name, a number, a note or a picture in {name} has to go for good? One part of it can be erased. That it was
        there stays to be seen.
      </p>
      <LinkButton href={eraseHref}>Erase a part of {name}</LinkButton>
    </details>
  );
}
