import type { Metadata } from 'next';
import { getCurrentActor } from '@/app/_server/actor';
import { EntryWorkspace } from '@/components/entry/entry-workspace';
import { EntryFrame } from '@/components/notebook/entry-frame';
import { EntryHeader } from '@/components/notebook/entry-header';
import { SignatureStrip } from '@/components/notebook/signature-strip';
import { formatMoment } from '@/components/ui/format-date';
import { db } from '@/db/client';
import { env } from '@/db/env';
import { getLab } from '@/db/queries/lab/get-lab';
import { renameEntryAction, setExperimentDateAction } from './actions';
import { loadEntry } from './load-entry';

type Props = { params: Promise<{ id: string }> };

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const { entry } = await loadEntry((await params).id);
  return { title: `${entry.notebookCode} ${entry.number}${entry.title ? `, ${entry.title}` : ''}` };
}

export default async function EntryPage({ params }: Props) {
  const { entry } = await loadEntry((await params).id);
  const actor = await getCurrentActor();
  const { timeZone } = await getLab(db());
  return (
    <EntryFrame>
      <EntryWorkspace
        entryId={entry.id}
        epoch={entry.epoch}
        wsUrl={env().MOTEBOOK_WS_URL}
        person={{ name: actor.name }}
        mayWrite={entry.may.write}
        timeZone={timeZone}
        header={
          <EntryHeader
            entry={{
              id: entry.id,
              notebookId: entry.notebookId,
              notebookCode: entry.notebookCode,
              notebookTitle: entry.notebookTitle,
              number: entry.number,
              title: entry.title,
              experimentDate: entry.experimentDate,
              people: entry.people,
              editable: entry.may.write,
            }}
            rename={renameEntryAction}
            setDate={setExperimentDateAction}
          />
        }
      />
      <SignatureStrip
        state={entry.state}
        startedBy={entry.startedBy}
        startedAt={formatMoment(entry.startedAt, timeZone)}
        timeZone={timeZone}
      />
    </EntryFrame>
  );
}
