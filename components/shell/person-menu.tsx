'use client';

import { signOut } from 'next-auth/react';
import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Menu, MenuChoice, MenuItem, MenuNote, MenuRule } from '@/components/ui/menu';
import { applyTheme, type ThemeChoice } from './theme';

const themes: readonly { value: ThemeChoice; label: string }[] = [
  { value: 'system', label: 'As this device' },
  { value: 'light', label: 'Light' },
  { value: 'dark', label: 'Dark' },
];

/** Who is signed in, how the pages look, and the way out. */
export function PersonMenu({
  name,
  role,
  theme: stored,
}: {
  name: string;
  /** In words: "PI", "researcher, administrator". */
  role: string;
  theme: ThemeChoice;
}) {
  const router = useRouter();
  const [theme, setTheme] = useState(stored);
  const [fault, setFault] = useState('');
  const initials = name
    .split(' ')
    .map((part) => part[0] ?? '')
    .join('')
    .slice(0, 2);

  async function leave(): Promise<void> {
    try {
      await signOut({ redirect: false });
    } catch (error) {
      console.warn('sign-out could not be sent', error);
      return setFault('The server cannot be reached, so you are still signed in here. Try again.');
    }
    // A full load, so that nothing of this person stays in the page's memory.
    // eslint-disable-next-line @next/next/no-location-assign-relative-destination
    location.assign('/sign-in');
  }

  return (
    <>
      <Menu
        side="top"
        trigger={
          <button
            type="button"
            className="flex min-h-11 min-w-11 items-center justify-center gap-2.5 px-3 text-left max-tab:px-4 desk:w-full desk:justify-start"
          >
            <span
              aria-hidden
              className="label flex size-8 shrink-0 items-center justify-center rounded-full border border-control text-fine desk:size-7"
            >
              {initials}
            </span>
            <span className="label line-clamp-2 text-muted max-desk:sr-only">{name}</span>
            <span className="sr-only">, your account</span>
          </button>
        }
      >
        <MenuNote>
          <span className="small block font-semibold text-ink">{name}</span>
          {role}
        </MenuNote>
        <MenuRule />
        <MenuItem onSelect={() => router.push('/profile')}>Your profile</MenuItem>
        <MenuRule />
        <MenuChoice
          label="Appearance"
          value={theme}
          choices={themes}
          onChange={(choice) => {
            setTheme(choice);
            applyTheme(choice);
          }}
        />
        <MenuRule />
        <MenuItem onSelect={() => router.push('/planner')}>Plan a measurement</MenuItem>
        <MenuItem onSelect={() => router.push('/methods')}>How numbers come about</MenuItem>
        <MenuItem onSelect={() => void leave()}>Sign out</MenuItem>
      </Menu>
      <p
        role="alert"
        className={
          fault
            ? 'label fixed bottom-20 left-4 z-50 max-w-72 border bg-page p-3 text-madder shadow-float'
            : 'sr-only'
        }
      >
        {fault}
      </p>
    </>
  );
}
