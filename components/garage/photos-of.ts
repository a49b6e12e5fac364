import { fieldTree, itemsOf } from '@/lib/domain/field-changes';
import type { KeptFile, UploadAnswer } from './draft-store';
import type { DraftView } from './open-draft';

/** A photo of the draft: on this device, on the server, or both. */
export interface Photo {
  id: string;
  name: string;
  mediaType: string;
  file?: KeptFile;
  upload?: UploadAnswer;
}

/** Photos the fields name, those of this device first known by their file, others by their upload. */
export function photosOf({ fields, files, uploads }: Pick<DraftView, 'fields' | 'files' | 'uploads'>): Photo[] {
  const named = itemsOf(fieldTree(fields), 'photos').map(({ id }) => id);
  const ids = [...new Set([...named, ...files.filter(({ state }) => state === 'refused').map(({ id }) => id)])];
  return ids.map((id) => {
    const file = files.find((one) => one.id === id);
    const upload = uploads.find((one) => one.id === id);
    const known = file ?? upload;
    return {
      id,
      name: known?.name ?? 'Photo from another device',
      mediaType: known?.mediaType ?? '',
      ...(file ? { file } : {}),
      ...(upload ? { upload } : {}),
    };
  });
}
