'use client';

import { useEffect } from 'react';
import './globals.css';

/** Shown when not even the frame of a page could be drawn. */
export default function GlobalError({ error }: { error: Error & { digest?: string } }) {
  useEffect(() => console.error(error), [error]);
  return (
    <html lang="en">
      <body>
        <main className="mx-auto max-w-page px-6 py-24">
          <title>Something went wrong · Motebook</title>
          <h1 className="text-title">Something went wrong on our side</h1>
          <p className="mt-3 max-w-measure text-text text-muted">
            The page could not be drawn. Everything that was marked as saved is safe. Reload the page; if it
            happens again, tell your administrator
            {error.digest ? ` and name this: ${error.digest}` : ''}.
          </p>
          <button type="button" className="link mt-6" onClick={() => location.reload()}>
            Reload the page
          </button>
        </main>
      </body>
    </html>
  );
}
