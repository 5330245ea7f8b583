import Link from 'next/link';

export interface DemoOffer {
  readonly password: string;
  readonly people: readonly { login: string; name: string; role: string; about: string }[];
}

/** The invented people of the demo: one click fills the form. */
export function DemoAccounts({ demo, onPick }: { demo: DemoOffer; onPick: (login: string) => void }) {
  return (
    <section aria-labelledby="demo-accounts" className="mt-10">
      <h2 id="demo-accounts" className="label font-semibold">
        Demonstration
      </h2>
      <p className="label text-muted">
        Everybody here is invented. Choose somebody to fill the form; the password of all is{' '}
        <span className="whitespace-nowrap text-ink select-all">{demo.password}</span>.
      </p>
      <ul className="mt-3 divide-y border-y">
        {demo.people.map(({ login, name, role, about }) => (
          <li key={login}>
            <button
              type="button"
              onClick={() => onPick(login)}
              className="group flex min-h-9 w-full items-baseline justify-between gap-4 py-1.5 text-left max-desk:min-h-11 max-desk:items-center pointer-coarse:min-h-11"
            >
              <span className="small text-ink underline-offset-4 group-hover:underline">{name}</span>
              <span className="label text-right text-muted">
                {role}, {about}
              </span>
            </button>
          </li>
        ))}
      </ul>
      <p className="label mt-3 text-muted">
        <Link href="/mail" className="underline underline-offset-4 hover:text-ink">
          Mail that is sent here
        </Link>{' '}
        stays on this machine.
      </p>
    </section>
  );
}
