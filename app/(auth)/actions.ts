'use server';

import { openAction } from '@/app/_server/open-action';
import { db } from '@/db/client';
import { askReset } from '@/db/commands/person/ask-reset';
import { setPassword } from '@/db/commands/person/set-password';
import { askResetInput, setPasswordInput } from '@/db/inputs/person';

export const setPasswordAction = openAction('set-password', setPasswordInput, (input, address) =>
  setPassword(db(), input, address),
);

export const askResetAction = openAction('ask-reset', askResetInput, (input, address) =>
  askReset(db(), input.name, address),
);
