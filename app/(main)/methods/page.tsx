import 'katex/dist/katex.min.css';
import { getCurrentActor } from '@/app/_server/actor';
import { ENGINE_VERSION } from '@/analysis/analyse';
import { AccuracyTable, measuredWith } from '@/components/methods/accuracy-table';
import { Formula } from '@/components/methods/formula';
import { remarks, sections, type Part, type Section } from '@/components/methods/sections';
import { Place, PlaceHeading } from '@/components/shell/place';

export const metadata = { title: 'Methods' };

export default async function MethodsPage() {
  // For everybody who is signed in; nothing on it belongs to a notebook.
  await getCurrentActor();
  return (
    <Place>
      <PlaceHeading
        title="Methods"
        note={`How each number comes about. This is ${ENGINE_VERSION.replace('/', ' ')}.`}
      />
      <nav aria-label="On this page" className="small mt-6 flex flex-wrap gap-x-5 gap-y-1">
        {[...sections, { id: 'accuracy', title: 'How good it is' }, { id: 'remarks', title: 'Remarks' }].map(
          ({ id, title }) => (
            <a key={id} href={`#${id}`} className="text-malachite underline-offset-4 hover:underline">
              {title}
            </a>
          ),
        )}
      </nav>
      {sections.map((section) => (
        <SectionView key={section.id} section={section} />
      ))}
      <section id="accuracy" className="mt-12 scroll-mt-6">
        <h2 className="text-heading">How good it is</h2>
        <p className="mt-3 max-w-measure">
          Simulated data with fixed seeds, analysed by {measuredWith.replace('/', ' ')} as any file is. What
          is not right is mostly undecided: few data say little. Every number of this table can be made again
          from the source.
        </p>
        <AccuracyTable />
      </section>
      <section id="remarks" className="mt-12 scroll-mt-6">
        <h2 className="text-heading">Remarks under a result</h2>
        <dl className="small mt-4 grid gap-x-6 gap-y-2 tab:grid-cols-[14rem_1fr]">
          {Object.entries(remarks).map(([code, words]) => (
            <div key={code} id={`remark-${code}`} className="contents">
              <dt className="font-semibold">{code.replaceAll('-', ' ')}</dt>
              <dd className="max-w-measure text-muted">{words}</dd>
            </div>
          ))}
        </dl>
        <p className="small mt-8 max-w-measure text-muted">
          Numbers are for research; not for diagnosis or release decisions without validated practice.
        </p>
      </section>
    </Place>
  );
}

function SectionView({ section }: { section: Section }) {
  return (
    <section id={section.id} className="mt-12 scroll-mt-6">
      <h2 className="text-heading">{section.title}</h2>
      {section.parts.map((part, at) => (
        <PartView key={at} part={part} />
      ))}
      <ul className="label mt-3 max-w-measure list-none space-y-0.5 text-muted">
        {section.sources.map((source) => (
          <li key={source}>{source}</li>
        ))}
      </ul>
    </section>
  );
}

function PartView({ part }: { part: Part }) {
  if (typeof part !== 'string') return <Formula tex={part.tex} display />;
  return (
    <p className="mt-3 max-w-measure">
      {part.split('$').map((piece, at) => (at % 2 === 1 ? <Formula key={at} tex={piece} /> : piece))}
    </p>
  );
}
