import Link from "next/link";

const WAYS = [["/", "Console"], ["/jobs", "Jobs"], ["/samples", "Sample sets"]] as const;

/** What stands at an address that leads nowhere. */
export function Nowhere() {
  return (
    <div className="mx-auto flex min-h-[60vh] max-w-md flex-col justify-center gap-4 px-5">
      <h1 className="text-lg font-semibold">Nothing stands at this address.</h1>
      <p className="text-sm text-dim">It may have been deleted, or belong to somebody who keeps it private.</p>
      <ul className="flex flex-wrap gap-x-5 text-sm">{WAYS.map(([path, title]) => <li key={path}><Link href={path} className="inline-flex min-h-8 items-center text-accent underline underline-offset-4">{title}</Link></li>)}</ul>
    </div>
  );
}
