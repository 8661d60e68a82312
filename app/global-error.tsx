'use client'

import './globals.css'

/** Stands in when the frame of every page is broken, so it leans on nothing but the style sheet. */
export default function GlobalError() {
  return (
    <html lang="en" data-theme="auto">
      <body>
        <title>Kilnward could not be shown</title>
        <main className="mx-auto flex min-h-dvh max-w-[760px] flex-col justify-center gap-6 px-6 py-8">
          <h1 className="text-44">Kilnward could not be shown</h1>
          <p className="max-w-[54ch] text-20">
            Nothing that was logged is lost. Try again; if it stays, restart the server and look at its log.
          </p>
          {/* Made at build time, so its scripts have no nonce and do not run: a form needs none. */}
          <form className="flex flex-wrap gap-3">
            <button type="submit" className="key key-64 key-go">
              Try again
            </button>
          </form>
        </main>
      </body>
    </html>
  )
}
