import { Wordmark } from '../pictures/mark';

/** There is no report at this address; what to do about it. */
export function Missing({ css }: { css: string }) {
  return (
    <html lang="en">
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <meta name="robots" content="noindex" />
        <title>No report here · Mendlight</title>
        <link rel="icon" href="/icon.svg" type="image/svg+xml" />
        <style>{css}</style>
      </head>
      <body>
        <main className="mx-auto grid min-h-dvh max-w-[480px] content-center gap-5 px-3 py-10">
          <Wordmark />
          <section className="rounded-panel bg-sheet p-7 max-sm:p-5">
            <h1>There is no report here</h1>
            <p className="mt-3">
              The address may have been cut off on its way. It ends with fourteen letters and
              digits, as on the label; ask the seller for it if they don’t match.
            </p>
          </section>
        </main>
      </body>
    </html>
  );
}
