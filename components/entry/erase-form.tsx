'use client';

import { FormShell, type FormAction } from '@/components/account/form-shell';
import { Notice } from '@/components/ui/notice';
import { Segments } from '@/components/ui/segments';
import { TextInput } from '@/components/ui/text-input';
import { Textarea } from '@/components/ui/textarea';
import { erasingWord, partWords, type ErasablePart } from '@/lib/domain/erasure';

export interface EraseFormProps {
  action: FormAction;
  hidden: Record<string, string>;
  parts: ErasablePart[];
  /** `entry 5` */
  name: string;
}

const capitalised = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** Which part, a word typed in full so that no slip of a finger does it, and a reason if one is to be told. */
export function EraseForm({ action, hidden, parts, name }: EraseFormProps) {
  if (parts.length === 0) return <Notice>There is nothing in {name} that can be erased.</Notice>;
  return (
    <FormShell action={action} submit="Erase for good" busy="Erasing" label={`Erase a part of ${name}`}>
      {({ fields, typed }) => (
        <>
          {Object.entries(hidden).map(([field, value]) => (
            <input key={field} type="hidden" name={field} value={value} />
          ))}
          <Segments
            label="What is to be erased"
            name="part"
            options={parts.map((part) => ({ value: part, label: capitalised(partWords[part]) }))}
            defaultValue={typed.part}
            error={fields.part}
          />
          <Textarea
            label="Reason"
            name="reason"
            isOptional
            hint="It is sealed and shown to every reader: leave out whatever is to be erased."
            rows={2}
            maxLength={500}
            defaultValue={typed.reason}
            error={fields.reason}
          />
          <TextInput
            label={`Type “${erasingWord}” to go on`}
            name="word"
            autoComplete="off"
            autoCapitalize="none"
            required
            defaultValue={typed.word}
            error={fields.word}
          />
        </>
      )}
    </FormShell>
  );
}
