import { describe, expect, test } from 'vitest';
import { renameEntryInput, setExperimentDateInput, startEntryInput } from '@/db/inputs/entry';
import { createNotebookInput } from '@/db/inputs/notebook';

const entryId = '0b0f5a3e-9d6c-4a57-8f0e-2f6a0a9f6d11';
const renamed = (title: string) => renameEntryInput.parse({ entryId, title }).title;

describe('a title', () => {
  test.each([
    ['  Beads,  second day ', 'Beads, second day'],
    ['one\r\nline\tonly', 'one line only'],
    ['D = 0.43\u2009µm²/s', 'D = 0.43\u2009µm²/s'],
    ['with\0zero', 'with zero'],
    ['\u202Eturned', 'turned'],
    ['e\u0301tude', '\u00E9tude'],
    ['', ''],
  ])('%j is kept as %j', (given, kept) => {
    expect(renamed(given)).toBe(kept);
  });

  test('300 characters fit, 301 are refused with the remedy', () => {
    expect(renamed('x'.repeat(300))).toHaveLength(300);
    const refused = renameEntryInput.safeParse({ entryId, title: 'x'.repeat(301) });
    expect(refused.error?.issues[0]).toMatchObject({
      path: ['title'],
      message: expect.stringContaining('Shorten'),
    });
  });
});

test.each(['2026-02-30', '2.3.2026', '1899-12-31', '2200-01-01', '', '2026-03-02T10:00'])(
  '%j is no day',
  (day) => {
    expect(setExperimentDateInput.safeParse({ entryId, experimentDate: day }).success).toBe(false);
  },
);

test('a day of the calendar is taken', () => {
  expect(setExperimentDateInput.parse({ entryId, experimentDate: '2024-02-29' }).experimentDate).toBe(
    '2024-02-29',
  );
});

test('what is not asked for is refused', () => {
  expect(startEntryInput.safeParse({ notebookId: entryId, createdBy: entryId }).success).toBe(false);
  expect(startEntryInput.safeParse({ notebookId: 'TRB' }).success).toBe(false);
});

describe('a notebook', () => {
  const given = { code: ' trb ', title: 'Tracers' };

  test('its code is written in capitals', () => {
    expect(createNotebookInput.parse(given)).toEqual({ code: 'TRB', title: 'Tracers', description: '' });
  });

  test.each(['', 'T', '1AB', 'TOOLONG', 'T-1', 'ÄB'])('%j is no code', (code) => {
    const refused = createNotebookInput.safeParse({ ...given, code });
    expect(refused.error?.issues[0]?.path).toEqual(['code']);
  });

  test('it must have a title', () => {
    expect(createNotebookInput.safeParse({ ...given, title: '  ' }).error?.issues[0]?.path).toEqual([
      'title',
    ]);
  });
});
