import { describe, expect, it } from 'vitest';
import { Garage } from '@/components/garage/garage';
import { memoryStore } from '@/components/garage/memory-store';
import type { DraftStore } from '@/components/garage/draft-store';
import type { SendFile } from '@/components/garage/upload-files';
import { refusal, ServerDouble } from './server-double';

const stored = (id: string) => ({
  id, sha256: 'ab', bytes: 1, mediaType: 'image/jpeg', name: 'a.jpg', receivedAt: '2026-04-18T12:00:00.000Z',
}); // prettier-ignore

/** A device whose clock the test moves and whose timers run when the test says so. */
function device(server: ServerDouble, store: DraftStore = memoryStore(), send?: SendFile) {
  const clock = { at: Date.parse('2026-04-18T14:00:00.000Z') };
  const waiting: { work: () => void; milliseconds: number }[] = [];
  const garage = new Garage({
    store,
    api: server,
    send: send ?? (async (file) => ({ ok: true, value: stored(file.id) })),
    now: () => new Date(clock.at),
    later: (work, milliseconds) => {
      const entry = { work, milliseconds };
      waiting.push(entry);
      return () => void waiting.splice(waiting.indexOf(entry) >>> 0, 1);
    },
  });
  return { garage, store, clock, waiting };
}

async function started(server: ServerDouble, store?: DraftStore, send?: SendFile) {
  const made = device(server, store, send);
  await made.garage.start();
  await made.garage.refresh();
  return made;
}
const signalLost = { ok: false, why: 'no-signal' } as const;

describe('a change', () => {
  it('is on the device before anything is sent, and is found again after the page was closed', async () => {
    const server = new ServerDouble();
    const { garage, store } = await started(server);
    server.failing = signalLost;
    const opened = await garage.create('worksheet', 'sorrel');
    await opened.set({ 'odometer/value': '12480' });
    const again = device(server, store);
    await again.garage.start();
    expect(again.garage.view.drafts[0]?.view.fields).toEqual({ 'odometer/value': '12480' });
    expect(again.garage.view.drafts[0]?.view.unsentCount).toBe(1);
  });

  it('of one field typed key by key is sent once, as its last text', async () => {
    const server = new ServerDouble();
    const { garage, store } = await started(server);
    const opened = await garage.create('worksheet', 'sorrel');
    for (const text of ['4', '4.', '4.2', '4.25']) await opened.set({ 'tasks/t/fills/f/amounts/a/amount': text });
    expect(await store.readChanges(opened.view.draft.id)).toHaveLength(1);
    await garage.sendAll();
    const held = server.drafts.get(opened.view.draft.id);
    expect(held?.changes.map(({ value }) => value)).toEqual(['4.25']);
    expect(opened.view.unsentCount).toBe(0);
  });

  it('typed while an earlier one is on its way is kept and sent after it', async () => {
    const server = new ServerDouble();
    const { garage } = await started(server);
    const opened = await garage.create('worksheet', 'sorrel');
    await opened.set({ title: 'Oil' });
    const send = server.sendChanges.bind(server);
    server.sendChanges = async (...sent) => {
      server.sendChanges = send;
      await opened.set({ title: 'Oil and filter' });
      return send(...sent);
    };
    await garage.sendAll();
    const texts = server.drafts.get(opened.view.draft.id)?.changes.map(({ value }) => value);
    expect(texts).toEqual(['Oil', 'Oil and filter']);
    expect(opened.view.fields.title).toBe('Oil and filter');
  });

  it('made after reading another device’s later-clocked one still wins', async () => {
    const server = new ServerDouble();
    const ahead = await started(server);
    ahead.clock.at += 3_600_000;
    const theirs = await ahead.garage.create('worksheet', 'sorrel');
    await theirs.set({ notes: 'from the clock that runs ahead' });
    await ahead.garage.sendAll();
    const mine = await started(server);
    const opened = mine.garage.view.drafts[0];
    await opened?.set({ notes: 'corrected' });
    await mine.garage.sendAll();
    await ahead.garage.refresh();
    expect(theirs.view.fields.notes).toBe('corrected');
  });

  it('that the device cannot write stays in the page, is said, and is written with the next', async () => {
    const store = memoryStore();
    const { garage } = await started(new ServerDouble(), store);
    const opened = await garage.create('worksheet', 'sorrel');
    const write = store.putChanges;
    store.putChanges = async () => Promise.reject(new Error('The disk is full.'));
    await opened.set({ title: 'Oil' });
    expect(opened.view.keepProblem).toBe('The disk is full.');
    expect(opened.view.fields.title).toBe('Oil');
    store.putChanges = write;
    await opened.set({ notes: 'second' });
    expect(opened.view.keepProblem).toBeUndefined();
    const kept = await store.readChanges(opened.view.draft.id);
    expect(kept.map(({ value }) => value).sort()).toEqual(['Oil', 'second']);
  });
});

describe('two devices', () => {
  it('that worked on one draft without signal agree once both have sent', async () => {
    const server = new ServerDouble();
    const phone = await started(server);
    const onPhone = await phone.garage.create('worksheet', 'sorrel');
    await onPhone.set({ title: 'Oil', 'odometer/value': '12480' });
    await phone.garage.sendAll();
    const desk = await started(server);
    const onDesk = desk.garage.view.drafts[0];
    server.failing = signalLost;
    phone.clock.at += 1000;
    await onPhone.set({ 'odometer/value': '12481' });
    desk.clock.at += 2000;
    await onDesk?.set({ 'odometer/value': '12482', notes: 'cold start' });
    server.failing = undefined;
    await phone.garage.sendAll();
    await desk.garage.sendAll();
    await phone.garage.refresh();
    const expected = { title: 'Oil', 'odometer/value': '12482', notes: 'cold start' };
    expect(onPhone.view.fields).toEqual(expected);
    expect(onDesk?.view.fields).toEqual(expected);
  });
});

describe('sending', () => {
  it('waits longer after each failure and starts over after a success', async () => {
    const server = new ServerDouble();
    const { garage, waiting } = await started(server);
    const opened = await garage.create('worksheet', 'sorrel');
    await opened.set({ title: 'Oil' });
    server.failing = signalLost;
    const delays: (number | undefined)[] = [];
    for (let attempt = 0; attempt < 7; attempt += 1) {
      await garage.sendAll();
      delays.push(waiting.at(-1)?.milliseconds);
    }
    expect(delays).toEqual([2000, 4000, 8000, 16_000, 32_000, 60_000, 60_000]);
    expect(garage.view.signal).toBe('no-signal');
    server.failing = undefined;
    await garage.sendAll();
    expect(garage.view.signal).toBe('ok');
    expect(opened.view.savedThereAt).toBeDefined();
  });

  it('does not ask again by itself while nobody is signed in', async () => {
    const server = new ServerDouble();
    const { garage, waiting } = await started(server);
    const opened = await garage.create('worksheet', 'sorrel');
    server.failing = { ok: false, why: 'not-signed-in' };
    await opened.set({ title: 'Oil' });
    await garage.sendAll();
    expect(waiting).toEqual([]);
    expect(garage.view.signal).toBe('not-signed-in');
  });

  it.each([true, false])(
    'sets aside the one change refused and sends the others (whole request: %s)',
    async (whole) => {
      const server = new ServerDouble();
      server.refusesWhole = whole;
      const { garage } = await started(server);
      const opened = await garage.create('worksheet', 'sorrel');
      server.badFields.add('notes');
      await opened.set({ title: 'Oil', notes: 'too long', 'odometer/value': '1' });
      await garage.sendAll();
      const fields = server.drafts.get(opened.view.draft.id)?.changes.map(({ field }) => field);
      expect(fields?.sort()).toEqual(['odometer/value', 'title']);
      expect(opened.view.refusals).toEqual([{ field: 'notes', sentence: 'This text is too long.' }]);
      expect(opened.view.fields.notes).toBe('too long');
    },
  );

  it('keeps what was typed on a draft that was sealed meanwhile, and says so', async () => {
    const server = new ServerDouble();
    const { garage } = await started(server);
    const opened = await garage.create('worksheet', 'sorrel');
    await opened.set({ title: 'Oil' });
    await garage.sendAll();
    const held = server.drafts.get(opened.view.draft.id);
    if (held) held.draft = { ...held.draft, state: 'sealed', sealedLog: 'log', sealedSeq: 12 };
    await opened.set({ notes: 'afterthought' });
    await garage.sendAll();
    expect(opened.view.draft).toMatchObject({ state: 'sealed', sealed: { log: 'log', seq: 12 } });
    expect(opened.view.draft.refusal).toBe('This worksheet is sealed as entry 12.');
    expect(opened.view.fields.notes).toBe('afterthought');
    expect(opened.view.unsentCount).toBe(1);
  });

  it('opened by its address on a fresh device belongs to the person the server names', async () => {
    const server = new ServerDouble();
    await server.openDraft({ id: 'w1', kind: 'worksheet', subject: 'sorrel' });
    const { garage } = device(server);
    await garage.start();
    const answer = await garage.open('w1');
    expect(answer.ok).toBe(true);
    expect(garage.view.drafts.map(({ view: { draft } }) => [draft.id, draft.person])).toEqual([['w1', 'imke']]);
  });

  it('never sends what another person typed on the same phone', async () => {
    const store = memoryStore();
    const imke = new ServerDouble('imke');
    const first = await started(imke, store);
    const opened = await first.garage.create('worksheet', 'sorrel');
    await opened.set({ title: 'Oil' });
    const joost = new ServerDouble('joost');
    const second = await started(joost, store);
    await second.garage.sendAll();
    expect(second.garage.view.drafts).toEqual([]);
    expect(joost.requests).toEqual([]);
    const back = await started(imke, store);
    expect(back.garage.view.drafts[0]?.view.unsentCount).toBe(0);
    expect(imke.drafts.get(opened.view.draft.id)?.changes).toHaveLength(1);
  });
});

describe('files', () => {
  const photo = (name: string) => ({ name, mediaType: 'image/jpeg', blob: new Blob(['x']) });

  it('are kept until the server has them; a refused one is named while the others go on', async () => {
    const server = new ServerDouble();
    const { garage, store } = await started(server, undefined, async (file, _blob, onProgress) => {
      onProgress(0.5);
      if (file.name === 'notes.txt') return refusal('unsupported-file', 'notes.txt is not a picture or a PDF.');
      return { ok: true, value: stored(file.id) };
    });
    const opened = await garage.create('receipt', 'shelf');
    await garage.addFile(opened, photo('front.jpg'));
    await garage.addFile(opened, photo('notes.txt'));
    await garage.addFile(opened, photo('back.jpg'));
    await garage.sendAll();
    const byName = Object.fromEntries(opened.view.files.map((file) => [file.name, file]));
    expect(byName['front.jpg']).toMatchObject({ state: 'sent' });
    expect(byName['back.jpg']).toMatchObject({ state: 'sent' });
    expect(byName['notes.txt']).toMatchObject({ state: 'refused', refusal: 'notes.txt is not a picture or a PDF.' });
    expect((await store.readFiles(opened.view.draft.id)).map(({ blob }) => blob !== undefined)).toEqual([
      false, true, false,
    ]); // prettier-ignore
    expect(garage.view.progress).toEqual({});
  });

  it('wait without signal and are sent with the same id when it is back', async () => {
    const server = new ServerDouble();
    const ids: string[] = [];
    let isDown = true;
    const { garage } = await started(server, undefined, async (file) => {
      ids.push(file.id);
      return isDown ? signalLost : { ok: true, value: stored(file.id) };
    });
    const opened = await garage.create('receipt', 'shelf');
    await garage.addFile(opened, photo('front.jpg'));
    await garage.sendAll();
    expect(opened.view.files[0]?.state).toBe('waiting');
    isDown = false;
    await garage.sendAll();
    expect(opened.view.files[0]?.state).toBe('sent');
    expect(new Set(ids).size).toBe(1);
  });
});
