import { expect, test } from 'vitest';
import { weakPassword } from '../../../db/inputs/weak-password';

const OWN = ['mira', 'mira.olsdal@lab.example', 'Mira Olsdal', 'Lakeside Optics Group'];

test.each([
  ['correct horse battery staple', /Many people/],
  ['Password Password', /Many people/],
  ['aaaaaaaaaaaaaaa', /repeats/],
  ['abcabcabcabcabcabc', /repeats/],
  ['motemotemotemote', /repeats/],
  ['abcdefghijklmnopq', /row of keys/],
  ['987654321098765', /row of keys/],
  ['qwertyuiop12345', /row of keys/],
  ['Mira Olsdal 2026', /your name/],
  ['lakeside-optics-group', /your name/],
  ['motebook-mira-01', /your name/],
])('refuses %j', (password, reason) => expect(weakPassword(password, OWN)).toMatch(reason));

// ASVS 5.0, 6.2.5: no rules about kinds of characters.
test.each([
  'slow brown motes in water',
  'ein langer satz ohne zahlen',
  'λόγος ἔργον χρόνος ὕδωρ',
  '🫧 seven bubbles rise 🫧',
  'mira likes eleven purple herons',
])('takes %j', (password) => expect(weakPassword(password, OWN)).toBeNull());
