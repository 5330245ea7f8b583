import { cookies } from 'next/headers';
import type { ReactNode } from 'react';
import { getCurrentActor } from '@/app/_server/actor';
import { roleInWords } from '@/components/people/words';
import { PersonMenu } from '@/components/shell/person-menu';
import { Spine } from '@/components/shell/spine';
import { readTheme, THEME_COOKIE } from '@/components/shell/theme';
import { may } from '@/db/policies/may';

/** The frame of all pages for signed-in people. Each page asks for its own rights; this only shows who is here. */
export default async function MainLayout({ children }: { children: ReactNode }) {
  const actor = await getCurrentActor();
  const theme = readTheme((await cookies()).get(THEME_COOKIE)?.value);
  return (
    <>
      <a
        href="#content"
        className="small fixed top-2 inline-flex min-h-11 items-center left-2 z-50 -translate-y-16 rounded-sm bg-malachite px-4 text-on-malachite focus:translate-y-0"
      >
        Skip to the page
      </a>
      <Spine
        person={<PersonMenu name={actor.name} role={roleInWords(actor)} theme={theme} />}
        keepsHouse={may(actor, 'people.read', null)}
      />
      <main id="content" tabIndex={-1} className="pb-20 tab:ml-16 tab:pb-0 desk:ml-44 print:m-0">
        {children}
      </main>
    </>
  );
}
