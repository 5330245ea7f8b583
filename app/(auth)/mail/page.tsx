import { notFound } from 'next/navigation';
import { readKeptMail } from '@/app/_server/fakes/mail-store';
import { formatMoment } from '@/components/ui/format-date';
import { EmptyPlace } from '@/components/ui/empty-place';
import { db } from '@/db/client';
import { env } from '@/db/env';
import { findLab } from '@/db/queries/lab/find-lab';
import { MailText } from './_parts/mail-text';

export const metadata = { title: 'Mail of the demonstration' };
export const dynamic = 'force-dynamic';

/** What the demo's own mail server got. Only there: in a demo every address is made up and every password is printed. */
export default async function MailPage() {
  const { MOTEBOOK_MODE, MOTEBOOK_MAIL_FOLDER } = env();
  if (MOTEBOOK_MODE !== 'demo' || !MOTEBOOK_MAIL_FOLDER) notFound();
  const kept = await readKeptMail(MOTEBOOK_MAIL_FOLDER);
  const timeZone = (await findLab(db()))?.timeZone ?? 'UTC';
  return (
    <main className="mx-auto max-w-3xl px-6 py-12">
      <h1 className="text-title">Mail of the demonstration</h1>
      <p className="small mt-1 text-muted">
        Nothing leaves this machine: what would be sent by mail is kept here, the newest first.
      </p>
      <div className="mt-8">
        {kept.length === 0 ? <EmptyPlace>No mail has been sent yet.</EmptyPlace> : null}
        {kept.map((mail) => (
          <article key={mail.id} className="border-t py-5">
            <h2 className="text-heading">{mail.subject}</h2>
            <p className="label break-all text-muted">
              To {mail.to.join(', ')}, {formatMoment(new Date(mail.at), timeZone)}
            </p>
            <MailText text={mail.text} origin={env().NEXTAUTH_URL} />
          </article>
        ))}
      </div>
    </main>
  );
}
