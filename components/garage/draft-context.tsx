'use client';

import { createContext, use, useMemo, type ReactNode } from 'react';
import type { Fields } from '@/lib/domain/field-changes';
import { useDraft } from './garage-context';
import type { DraftView, OpenDraft } from './open-draft';

interface DraftInScreen {
  opened: OpenDraft;
  view: DraftView;
  /** Sentences by field. */
  problems: Readonly<Record<string, string>>;
  /** Whether what is still empty is complained about too. */
  isAllShown: boolean;
}

const DraftContext = createContext<DraftInScreen | undefined>(undefined);

interface DraftProviderProps {
  opened: OpenDraft;
  judge: (fields: Fields) => Record<string, string>;
  isAllShown?: boolean;
  children: ReactNode;
}

export function DraftProvider({ opened, judge, isAllShown = false, children }: DraftProviderProps) {
  const view = useDraft(opened);
  const problems = useMemo(() => {
    const refused = view.refusals.map(({ field, sentence }): [string, string] => [field, sentence]);
    return { ...judge(view.fields), ...Object.fromEntries(refused) };
  }, [judge, view.fields, view.refusals]);
  const value = useMemo(() => ({ opened, view, problems, isAllShown }), [opened, view, problems, isAllShown]);
  return <DraftContext value={value}>{children}</DraftContext>;
}

export function useDraftInScreen(): DraftInScreen {
  const value = use(DraftContext);
  if (!value) throw new Error('This field stands outside a worksheet or receipt.');
  return value;
}

export interface DraftField {
  value: string;
  set: (value: string) => void;
  error: string | undefined;
}

interface Item {
  path: string;
  /** Fields that say what the item is: written with its first figure, cleared with its last. */
  seed: Record<string, string>;
}
const ItemContext = createContext<Item | undefined>(undefined);

/** One item of a collection, such as a torque. It is in the draft only while something is entered for it. */
export function DraftItem({ path, seed, children }: Item & { children: ReactNode }) {
  const value = useMemo(() => ({ path, seed }), [path, seed]);
  return <ItemContext value={value}>{children}</ItemContext>;
}

/** What else changes when a field of an item does. */
export function withSeed(
  fields: Fields,
  item: Item | undefined,
  path: string,
  value: string,
): Record<string, string | null> {
  const at = item ? `${item.path}/` : undefined;
  if (!item || at === undefined || !path.startsWith(at)) return { [path]: value };
  const seeds = Object.entries(item.seed).map(([name, text]): [string, string] => [at + name, text]);
  if (value !== '') {
    const missing = seeds.filter(([field]) => fields[field] === undefined);
    const back = fields[`${at}removed`] === undefined ? {} : { [`${at}removed`]: null };
    return { ...Object.fromEntries(missing), ...back, [path]: value };
  }
  const isSeed = (field: string) =>
    seeds.some(([name]) => name === field) || field.endsWith('/unit') || field.endsWith('/step');
  const isLast = Object.keys(fields).every((field) => !field.startsWith(at) || field === path || isSeed(field));
  return isLast ? { ...Object.fromEntries(seeds.map(([field]) => [field, null])), [path]: null } : { [path]: null };
}

/** Writes one or more fields, with what belongs to their item. */
export function useDraftSet(): (entries: Record<string, string | null>) => void {
  const { opened } = useDraftInScreen();
  const item = use(ItemContext);
  return (entries) => {
    const all = Object.entries(entries).map(([path, value]) => withSeed(opened.view.fields, item, path, value ?? ''));
    void opened.set(Object.assign({}, ...all) as Record<string, string | null>);
  };
}

/** One field of the draft. What is written into it is on this device with the next turn of the event loop. */
export function useDraftField(path: string): DraftField {
  const { view, problems, isAllShown } = useDraftInScreen();
  const setAll = useDraftSet();
  const value = view.fields[path] ?? '';
  return {
    value,
    set: (typed) => setAll({ [path]: typed }),
    // An empty field is not wrong while one is still working; it is on the summary.
    error: value !== '' || isAllShown ? problems[path] : undefined,
  };
}
