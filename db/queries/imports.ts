import 'server-only';
import type { Transaction } from '../index';
import { importedRecords, type ImportedRecordRow } from '../models/proof';

export type { ImportedRecordRow };

export const findImport = (id: string) => importedRecords.find({ id, removedAt: null });

export async function holdsImport({ id, personId }: { id: string; personId: string }): Promise<boolean> {
  return (await importedRecords.count({ id, personId, removedAt: null })) > 0;
}

/** Newest first. */
export const importsOf = (personId: string, options: { transaction?: Transaction } = {}) =>
  importedRecords.all({ personId, removedAt: null }, { order: [['importedAt', 'DESC']], ...options });

export const insertImport = (row: ImportedRecordRow, transaction: Transaction) =>
  importedRecords.insert(row, { transaction });

export const updateImport = (id: string, values: Partial<ImportedRecordRow>, transaction: Transaction) =>
  importedRecords.update({ id }, values, { transaction });
