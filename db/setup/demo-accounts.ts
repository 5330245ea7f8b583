import type { MemberRole, PersonRole } from '../policies/may';

/** The invented group of the demo, and its people. One password for all, printed at start and shown at sign-in. */
export const DEMO_PASSWORD = 'drifting-motes-demo';
export const DEMO_LAB = { name: 'Tarnfield Soft Matter Group', timeZone: 'Europe/Oslo' };

export interface DemoPerson {
  readonly login: string;
  readonly name: string;
  readonly role: PersonRole;
  readonly admin: boolean;
  /** What this account is good for, in a few words. */
  readonly about: string;
}

export const demoPeople: readonly DemoPerson[] = [
  { login: 'marenko', name: 'Ilse Marenko', role: 'pi', admin: false, about: 'leads the group' },
  { login: 'noor', name: 'Noor Vantongeren', role: 'researcher', admin: false, about: 'writes entries' },
  { login: 'keita', name: 'Keita Salvesen', role: 'researcher', admin: false, about: 'writes entries' },
  {
    login: 'rosalind',
    name: 'Rosalind Achterberg',
    role: 'guest',
    admin: false,
    about: 'reads what is shared',
  },
  { login: 'tove', name: 'Tove Brandvoll', role: 'researcher', admin: false, about: 'writes entries' },
  {
    login: 'ansel',
    name: 'Ansel Rooke-Mbeki',
    role: 'researcher',
    admin: false,
    about: 'witnesses what others write',
  },
  { login: 'mateus', name: 'Mateus Quillfeather', role: 'researcher', admin: true, about: 'keeps the house' },
];

export const demoEmail = (login: string): string => `${login}@tarnfield.example`;

/** A notebook of the demo and who belongs to it. */
export interface DemoNotebook {
  readonly code: string;
  readonly title: string;
  readonly description: string;
  readonly members: Readonly<Record<string, MemberRole>>;
}

export const demoNotebooks: readonly DemoNotebook[] = [
  {
    code: 'TRB',
    title: 'Tracer beads and vesicles',
    description: 'Reference beads, their daily checks, and first runs with lipid vesicles.',
    members: { marenko: 'owner', noor: 'editor', keita: 'editor', ansel: 'witness', rosalind: 'reader' },
  },
  {
    code: 'VIS',
    title: 'Viscosity by tracer',
    description: 'What beads of a known size say of the liquid that they are in.',
    members: { marenko: 'owner', tove: 'editor', noor: 'reader', ansel: 'witness' },
  },
  {
    code: 'WEL',
    title: 'Wells, gels and crowds',
    description: 'Motion that is not free: between walls, in soft gels, carried along.',
    members: { marenko: 'owner', keita: 'editor', tove: 'editor', noor: 'reader', ansel: 'witness' },
  },
];
