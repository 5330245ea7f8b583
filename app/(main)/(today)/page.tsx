import Link from 'next/link';
import { getCurrentActor } from '@/app/_server/actor';
import { startEntryAction } from '@/app/(main)/actions';
import { Ledger } from '@/components/notebook/ledger';
import { StartEntry } from '@/components/notebook/start-entry';
import { Place, PlaceHeading } from '@/components/shell/place';
import { buttonClasses } from '@/components/ui/button';
import { EmptyPlace } from '@/components/ui/empty-place';
import { formatDay } from '@/components/ui/format-date';
import { db } from '@/db/client';
import { may } from '@/db/policies/may';
import { listRecentEntries } from '@/db/queries/entry/list-recent-entries';
import { getLab } from '@/db/queries/lab/get-lab';
import { listNotebooks } from '@/db/queries/notebook/list-notebooks';

export const metadata = { title: 'Today' };

const DRAFTS_MAX = 12;
const OTHERS_MAX = 8;

export default async function TodayPage() {
  const actor = await getCurrentActor();
  const [lab, notebooks, drafts, others] = await Promise.all([
    getLab(db()),
    listNotebooks(db(), actor),
    listRecentEntries(db(), actor, { whose: 'mine', limit: DRAFTS_MAX }),
    listRecentEntries(db(), actor, { whose: 'others', limit: OTHERS_MAX }),
  ]);
  const writable = notebooks.filter(({ may }) => may.startEntry);
  return (
    <Place>
      <PlaceHeading
        title="Today"
        note={`${formatDay(lab.today, 'weekday')} in ${lab.timeZone.split('/').at(-1)?.replaceAll('_', ' ')}`}
      />
      <div className="mt-8">
        {writable.length > 0 ? (
          <StartEntry
            places={writable.map(({ id, code, title, todays }) => ({ id, code, title, todays }))}
            start={startEntryAction}
          />
        ) : (
          <NothingToWrite mayCreate={may(actor, 'notebook.create', null)} belongs={notebooks.length > 0} />
        )}
      </div>
      {writable.length > 0 ? (
        <section aria-labelledby="drafts" className="mt-14">
          <h2 id="drafts" className="mb-3 text-heading">
            Your entries in progress
          </h2>
          {drafts.length > 0 ? (
            <Ledger lines={drafts} label="Your entries in progress" />
          ) : (
            <EmptyPlace>
              Drafts that you write in, alone or with others, stand here until they are signed.
            </EmptyPlace>
          )}
        </section>
      ) : null}
      {others.length > 0 ? (
        <section aria-labelledby="others" className="mt-14">
          <h2 id="others" className="mb-3 text-heading">
            Lately in your notebooks
          </h2>
          <Ledger lines={others} label="Lately in your notebooks" />
        </section>
      ) : null}
    </Place>
  );
}

function NothingToWrite({ mayCreate, belongs }: { mayCreate: boolean; belongs: boolean }) {
  if (mayCreate) {
    return (
      <EmptyPlace
        step={
          <Link href="/notebooks?new" className={buttonClasses('primary')}>
            Make a notebook
          </Link>
        }
      >
        Entries lie in notebooks, and you can write in none yet. Make the first one; it takes a code and a
        title.
      </EmptyPlace>
    );
  }
  return (
    <p className="max-w-measure border-y py-6 text-text text-muted">
      {belongs
        ? 'You read what is shared with you here. Entries are started by the owners and editors of a notebook.'
        : 'You belong to no notebook yet. The PI or an owner of a notebook can add you; it then appears here.'}
    </p>
  );
}
