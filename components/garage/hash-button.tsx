'use client';

import { LinkButton, type LinkButtonProps } from '@/components/ui/button';

/**
 * A button-like link to another screen of the garage. The browser itself follows the hash: the router would put it in
 * the address without telling the page.
 */
export function HashButton({ href, ...rest }: Omit<LinkButtonProps, 'href'> & { href: string }) {
  return (
    <LinkButton
      {...rest}
      href={href}
      prefetch={false}
      onClick={(event) => {
        if (event.metaKey || event.ctrlKey || event.shiftKey) return;
        event.preventDefault();
        window.location.hash = href;
      }}
    />
  );
}
