"use client";

/** Stands in where even the frame of the page failed; it can rely on nothing. */
export default function GlobalError({ reset }: { error: Error; reset: () => void }) {
  return (
    <html lang="en">
      <body style={{ fontFamily: "monospace", margin: "4rem auto", maxWidth: "30rem", padding: "0 1rem" }}>
        <h1 style={{ fontSize: "1.2rem" }}>Tufa failed to load.</h1>
        <p>Nothing that is stored was touched.</p>
        <button type="button" onClick={reset}>Try again</button>
      </body>
    </html>
  );
}
