import { describe, expect, test } from 'vitest';
import { access, actions, can, noStanding, type Action, type Standing } from '@/lib/auth/access';

const standings: Record<string, Standing> = {
  stranger: noStanding,
  'owner of the machine': { ...noStanding, machine: 'owner' },
  'helper on the machine': { ...noStanding, machine: 'helper' },
  'owner of the shelf': { ...noStanding, shelf: 'owner' },
  'helper on the shelf': { ...noStanding, shelf: 'helper' },
  technician: { ...noStanding, shop: 'technician' },
  'holder of the import': { ...noStanding, import: 'holder' },
  steward: { ...noStanding, isSteward: true },
};

/** Everybody who may, written out; whoever is not named may not. */
const expected: Record<Action, string[]> = {
  'read-machine': ['owner of the machine', 'helper on the machine'],
  'set-up-machine': ['owner of the machine'],
  'edit-worksheet': ['owner of the machine', 'helper on the machine'],
  seal: ['owner of the machine'],
  'read-record': ['owner of the machine', 'helper on the machine'],
  share: ['owner of the machine'],
  export: ['owner of the machine'],
  'read-shelf': ['owner of the shelf', 'helper on the shelf'],
  'edit-shelf': ['owner of the shelf', 'helper on the shelf'],
  'confirm-receipt': ['owner of the shelf'],
  countersign: ['technician'],
  'hold-import': ['holder of the import'],
  steward: ['steward'],
};

describe('who may do what', () => {
  for (const action of actions) {
    for (const [who, standing] of Object.entries(standings)) {
      const may = expected[action].includes(who);
      test(`${action}: ${who} ${may ? 'may' : 'may not'}`, () => {
        expect(can(action, standing)).toBe(may);
      });
    }
  }

  test('the written-out table names every action', () => {
    expect(Object.keys(expected).sort()).toEqual([...actions].sort());
  });

  test('nothing that seals, shares or sets up is open to a helper', () => {
    const all: Standing = { machine: 'helper', shelf: 'helper', shop: 'none', import: 'none', isSteward: false };
    expect(actions.filter((action) => can(action, all)).sort()).toEqual([
      'edit-shelf',
      'edit-worksheet',
      'read-machine',
      'read-record',
      'read-shelf',
    ]);
  });

  test('a steward has no way into a machine, a shelf or a shop', () => {
    const open = actions.filter((action) => can(action, { ...noStanding, isSteward: true }));
    expect(open.map((action) => access[action].on)).toEqual(['installation']);
  });

  test('an owner of one machine is nobody on another', () => {
    expect(can('read-record', noStanding)).toBe(false);
  });
});
