import type { PersonRole } from '../policies/may';

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
  { login: 'mateus', name: 'Mateus Quillfeather', role: 'researcher', admin: true, about: 'keeps the house' },
];

export const demoEmail = (login: string): string => `${login}@tarnfield.example`;
