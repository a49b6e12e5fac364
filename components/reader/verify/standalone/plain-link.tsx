import type { ComponentPropsWithRef } from 'react';

/** Stands in for the router’s link, which a page from disk does not have. */
export default function PlainLink({ children, ...rest }: ComponentPropsWithRef<'a'>) {
  return <a {...rest}>{children}</a>;
}
