import type { Metadata } from 'next';
import { EntryFrame } from '@/components/notebook/entry-frame';
import { EntryHeader } from '@/components/notebook/entry-header';
import { SignatureStrip } from '@/components/notebook/signature-strip';
import { formatMoment } from '@/components/ui/format-date';
import { db } from '@/db/client';
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
  const { timeZone } = await getLab(db());
  return (
    <EntryFrame>
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
      <SignatureStrip
        state={entry.state}
        startedBy={entry.startedBy}
        startedAt={formatMoment(entry.startedAt, timeZone)}
        timeZone={timeZone}
      />
    </EntryFrame>
  );
}
