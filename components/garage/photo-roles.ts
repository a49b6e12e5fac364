import type { AttachmentRole } from '@/lib/evidence/format';

/** What a photo shows, in the order it is offered. */
export const roleWords: Record<AttachmentRole, string> = {
  'receipt-front': 'Front',
  'receipt-back': 'Back',
  'receipt-page': 'Page',
  odometer: 'Odometer',
  'as-found': 'As found',
  'as-left': 'As left',
  magnet: 'Magnet',
  part: 'Part',
  'manual-page': 'Manual page',
  'work-order': 'Work order',
  'lab-report': 'Lab report',
  document: 'Other paper',
};

export const receiptRoles: readonly AttachmentRole[] = ['receipt-front', 'receipt-back', 'receipt-page'];
export const worksheetRoles: readonly AttachmentRole[] = [
  'odometer', 'as-found', 'as-left', 'magnet', 'part', 'manual-page', 'work-order',
]; // prettier-ignore
export const addendumRoles: readonly AttachmentRole[] = [
  'as-found', 'as-left', 'odometer', 'magnet', 'part', 'manual-page', 'work-order', 'lab-report', 'document',
]; // prettier-ignore
