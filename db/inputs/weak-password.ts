/** Long passwords that many people choose (from memory of lists of leaked ones), folded as `fold` does. */
const COMMON = new Set([
  'correcthorsebatterystaple',
  'passwordpassword',
  'passwordpasswordpassword',
  'letmeinletmein',
  'iloveyouiloveyou',
  'thequickbrownfox',
  'thequickbrownfoxjumpsoverthelazydog',
  'qwertyuiopasdfghjkl',
  'qwertyuiopasdfghjklzxcvbnm',
  'qwertyuiopqwerty',
  'administrator123',
  'changemechangeme',
  'tobeornottobethatisthequestion',
  'opensesameopensesame',
  'ihatepasswords123',
]);
const ROWS = ['abcdefghijklmnopqrstuvwxyz', '01234567890123456789', 'qwertyuiop', 'asdfghjkl', 'zxcvbnm'];
/** What must remain of a password when everything that is easy to guess is taken out. */
const LEAST_REST = 8;

const fold = (text: string) =>
  text
    .normalize('NFKC')
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]/gu, '');

/**
 * Why a password, though long enough, would soon be guessed (ASVS 6.2.4, 6.2.11: common ones, and words of the place).
 * @param own - names that an attacker knows: login name, name, address, group.
 * @returns a sentence, or null when nothing speaks against it.
 */
export function weakPassword(password: string, own: readonly string[]): string | null {
  const folded = fold(password);
  if (COMMON.has(folded))
    return 'Many people have chosen this password. Take a few words that do not belong together.';
  if (new Set(password.normalize('NFKC').toLowerCase()).size < 5 || repeats(folded))
    return 'This password repeats itself. Take a few words that do not belong together.';
  let rest = folded;
  for (const row of ROWS) rest = withoutRuns(rest, row);
  if (rest.length < folded.length && rest.length < LEAST_REST)
    return 'This password is a row of keys or numbers. Take a few words that do not belong together.';
  for (const word of ownWords(own)) rest = rest.replaceAll(word, '');
  if (rest.length < folded.length && rest.length < LEAST_REST)
    return 'This password is made of your name, the group or the product. Take a few words that do not belong together.';
  return null;
}

function ownWords(own: readonly string[]): string[] {
  const words = [...own, 'motebook'].flatMap((text) => [
    fold(text),
    ...text.split(/[^\p{L}\p{N}]+/u).map(fold),
  ]);
  return [...new Set(words)].filter((word) => word.length >= 3).sort((a, b) => b.length - a.length);
}

function repeats(text: string): boolean {
  for (let period = 1; period <= Math.min(8, text.length / 2); period++) {
    if ([...text].every((letter, i) => i < period || letter === text[i - period])) return true;
  }
  return false;
}

/** Takes out stretches of four or more that follow a row of the keyboard, the alphabet or the numbers, in either direction. */
function withoutRuns(text: string, row: string): string {
  const back = [...row].reverse().join('');
  let rest = '';
  for (let at = 0; at < text.length;) {
    let length = 1;
    while (
      at + length < text.length &&
      [row, back].some((line) => line.includes(text.slice(at, at + length + 1)))
    )
      length++;
    if (length < 4) rest += text.slice(at, at + 1);
    at += length < 4 ? 1 : length;
  }
  return rest;
}
