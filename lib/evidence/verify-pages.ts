import type { Finding } from '@/lib/evidence/finding';
import type { Findings } from '@/lib/evidence/findings';
import type { PageSignature } from '@/lib/evidence/pdf-signature';

/**
 * Decides what the pages of a packet are worth: they count as checked only if the certificate that the record names
 * signed the whole file.
 *
 * @param certificate `packetCertificate` of the record; null: its pages were never signed
 * @param pages what the PDF's own signature amounts to; undefined if only a record was given
 * @param isBound whether the record's own signature holds: else it names a certificate on nobody's word
 * @example checkPages(bundle.packetCertificate, container.pages, true, findings); // 'checked'
 */
export function checkPages(
  certificate: string | null,
  pages: PageSignature | undefined,
  isBound: boolean,
  findings: Findings,
): Finding['pages'] {
  if (pages === undefined) return 'none';
  if (certificate === null) {
    return notChecked('The pages were not checked: what counts is the record inside the packet.', findings);
  }
  const trouble = troubleOf(certificate, pages);
  if (trouble !== null) {
    const sentence = 'The pages are not as they were signed, or the record belongs to other pages. Read only the entries here.';
    findings.alter('pages-changed', {}, sentence, trouble);
    return 'changed';
  }
  if (!isBound) {
    const sentence = 'The pages count as not checked: the certificate that signed them is named by a record that does not hold.';
    return notChecked(sentence, findings);
  }
  return 'checked';
} // prettier-ignore

function troubleOf(certificate: string, pages: PageSignature): string | null {
  if (pages.state === 'none') return 'this PDF has no signature';
  if (pages.state === 'refused') return pages.reason;
  if (pages.certificate === certificate) return null;
  return `signed with the certificate ${pages.certificate}, the record names ${certificate}`;
}

function notChecked(sentence: string, findings: Findings): 'not-checked' {
  findings.remark('pages-not-checked', sentence);
  findings.notChecked.push('The pages of the packet: read the entries here, from the record inside it.');
  return 'not-checked';
}
