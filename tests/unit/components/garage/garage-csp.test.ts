import { describe, expect, it } from 'vitest';
import { inlineScriptHashes } from '@/scripts/garage-csp';

describe('the hashes of a page’s inline scripts', () => {
  // The script and its hash stand as the example in CSP level 3, section 8.1 ("alert('Hello, world.');").
  const hello = 'sha256-qznLcsROx4GACP2dm0UCKCzCG+HiZ1guq6ZZDob/Tng=';

  it('are those of the CSP standard for its own example', () => {
    expect(inlineScriptHashes("<script>alert('Hello, world.');</script>")).toEqual([hello]);
  });
  it('leave out scripts with a source, and name each text once', () => {
    const html =
      '<script src="/a.js" async=""></script>' +
      "<script id=\"x\">alert('Hello, world.');</script><script>alert('Hello, world.');</script>";
    expect(inlineScriptHashes(html)).toEqual([hello]);
  });
});
