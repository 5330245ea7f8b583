/**
 * Who may do what: one pure function, asked by actions, routes and the websocket server alike. Unknown means no.
 * The database repeats the one check that guards the record (append_updates), so that a slip here cannot write.
 */

export type PersonRole = 'pi' | 'researcher' | 'guest';
export type MemberRole = 'owner' | 'editor' | 'reader' | 'witness';
export type EntryState = 'draft' | 'closing' | 'signed' | 'countersigned' | 'void';

/** Somebody signed in, as the database knows them at this moment. */
export interface Actor {
  readonly personId: string;
  readonly loginId: string;
  readonly login: string;
  readonly name: string;
  readonly role: PersonRole;
  readonly admin: boolean;
  readonly active: boolean;
}

/** The actor's place in the notebook that the thing lies in; null: not a member. */
export interface InNotebook {
  readonly member: MemberRole | null;
  readonly archived?: boolean;
}

export interface InEntry extends InNotebook {
  readonly state: EntryState;
}

export interface NewPerson {
  readonly role: PersonRole;
  readonly admin: boolean;
  /** The inviter's place in the notebook that the new person joins; null: none is named. */
  readonly notebook: MemberRole | null;
}

export interface OtherPerson {
  /** Has never set a password. */
  readonly invited: boolean;
  /** Belongs to a notebook that the actor owns. */
  readonly inOwnNotebook: boolean;
}

/** Every action with what must be known about its thing. */
export interface ActionThings {
  'notebook.read': InNotebook;
  'notebook.create': null;
  /** Who belongs to it, and as what. */
  'notebook.members': InNotebook;
  'entry.create': InNotebook;
  'entry.read': InEntry;
  /** Body, title, date, settings of a block. */
  'entry.write': InEntry;
  'attachment.read': InEntry;
  'attachment.add': InEntry;
  'reading.create': InEntry;
  'measurements.read': null;
  'search.read': null;
  'people.read': null;
  'person.invite': NewPerson;
  /** A mail with a link: the invitation again, or a new password. Nobody ever sets or sees another's password. */
  'person.send-link': OtherPerson;
  /** Role and admin flag, closing and opening an account, handing its notebooks over, ending its logins. */
  'person.manage': null;
}

export type Action = keyof ActionThings;

const isMember = (thing: InNotebook) => thing.member !== null;
const isWriter = (actor: Actor, thing: InNotebook) =>
  actor.role !== 'guest' && (thing.member === 'owner' || thing.member === 'editor');
const isOpenDraft = (thing: InEntry) => thing.state === 'draft';

const rules: { [A in Action]: (actor: Actor, thing: ActionThings[A]) => boolean } = {
  'notebook.read': (_actor, thing) => isMember(thing),
  'notebook.create': (actor) => actor.role === 'pi' || (actor.admin && actor.role !== 'guest'),
  'notebook.members': (actor, thing) => actor.role !== 'guest' && thing.member === 'owner',
  'entry.create': (actor, thing) => isWriter(actor, thing) && !thing.archived,
  'entry.read': (_actor, thing) => isMember(thing),
  'entry.write': (actor, thing) => isWriter(actor, thing) && isOpenDraft(thing) && !thing.archived,
  'attachment.read': (_actor, thing) => isMember(thing),
  'attachment.add': (actor, thing) => isWriter(actor, thing) && isOpenDraft(thing) && !thing.archived,
  'reading.create': (actor, thing) => isWriter(actor, thing) && isOpenDraft(thing) && !thing.archived,
  'measurements.read': () => true,
  'search.read': () => true,
  'people.read': (actor) => actor.admin || actor.role === 'pi',
  'person.invite': (actor, thing) =>
    actor.admin
      ? thing.notebook === null || thing.notebook === 'owner'
      : actor.role === 'pi' && thing.notebook === 'owner' && thing.role !== 'pi' && !thing.admin,
  'person.send-link': (actor, thing) =>
    actor.admin || (actor.role === 'pi' && thing.invited && thing.inOwnNotebook),
  'person.manage': (actor) => actor.admin,
};

/** Whether `actor` may do `action` to `thing`. Nobody who is deactivated, or unknown, may do anything. */
export function may<A extends Action>(actor: Actor | null, action: A, thing: ActionThings[A]): boolean {
  if (actor === null || !actor.active) return false;
  // An own property: a name such as "constructor" must not find what every object inherits.
  return Object.hasOwn(rules, action) && rules[action](actor, thing);
}
