import { describe, expect, test } from 'vitest';
import {
  may,
  type Action,
  type Actor,
  type EntryState,
  type InEntry,
  type MemberRole,
  type PersonRole,
} from '../../../db/policies/may';

const actor = (role: PersonRole, given: Partial<Actor> = {}): Actor => ({
  personId: 'p',
  loginId: 'l',
  login: 'somebody',
  name: 'Some Body',
  role,
  admin: false,
  active: true,
  ...given,
});

const ROLES: PersonRole[] = ['pi', 'researcher', 'guest'];
const MEMBERS: (MemberRole | null)[] = ['owner', 'editor', 'reader', 'witness', null];
const STATES: EntryState[] = ['draft', 'closing', 'signed', 'countersigned', 'void'];
const READS = ['notebook.read', 'entry.read', 'attachment.read'] as const;
const WRITES = ['entry.write', 'attachment.add', 'reading.create'] as const;

const thing = (member: MemberRole | null, state: EntryState = 'draft', archived = false): InEntry => ({
  member,
  state,
  archived,
});

describe('who may do what', () => {
  test('reading needs membership and nothing else', () => {
    for (const action of READS)
      for (const role of ROLES)
        for (const member of MEMBERS)
          for (const state of STATES)
            expect(may(actor(role), action, thing(member, state, true)), `${action} ${role} ${member}`).toBe(
              member !== null,
            );
  });

  test('writing needs an owner or editor who is no guest, a draft, and a notebook that is not archived', () => {
    for (const action of WRITES)
      for (const role of ROLES)
        for (const member of MEMBERS)
          for (const state of STATES)
            for (const archived of [false, true]) {
              const right = role !== 'guest' && (member === 'owner' || member === 'editor');
              const allowed = right && state === 'draft' && !archived;
              const said = `${action} ${role} ${member} ${state} ${archived}`;
              expect(may(actor(role), action, thing(member, state, archived)), said).toBe(allowed);
            }
  });

  test('starting an entry needs the same right, whatever the state of others', () => {
    expect(may(actor('researcher'), 'entry.create', { member: 'editor' })).toBe(true);
    expect(may(actor('researcher'), 'entry.create', { member: 'editor', archived: true })).toBe(false);
    expect(may(actor('guest'), 'entry.create', { member: 'editor' })).toBe(false);
    expect(may(actor('pi'), 'entry.create', { member: 'reader' })).toBe(false);
  });

  test('notebooks are made by PIs and administrators', () => {
    expect(may(actor('pi'), 'notebook.create', null)).toBe(true);
    expect(may(actor('researcher', { admin: true }), 'notebook.create', null)).toBe(true);
    expect(may(actor('researcher'), 'notebook.create', null)).toBe(false);
    expect(may(actor('guest', { admin: true }), 'notebook.create', null)).toBe(false);
  });

  test('being an administrator, or the PI, opens no entry', () => {
    expect(may(actor('pi', { admin: true }), 'entry.read', thing(null))).toBe(false);
    expect(may(actor('pi', { admin: true }), 'entry.write', thing('reader'))).toBe(false);
  });

  test('nobody, and a closed account, may do nothing', () => {
    for (const action of [...READS, ...WRITES]) {
      expect(may(null, action, thing('owner'))).toBe(false);
      expect(may(actor('pi', { active: false }), action, thing('owner'))).toBe(false);
    }
    expect(may(null, 'measurements.read', null)).toBe(false);
  });

  test.each(['entry.delete', 'constructor', 'toString', '__proto__', ''])(
    'the unknown action %j is refused',
    (name) => {
      expect(may(actor('pi', { admin: true }), name as Action, thing('owner'))).toBe(false);
    },
  );
});
