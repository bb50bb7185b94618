import type { ReactNode } from "react";

/** A page of running content: title, what can be done on the right, and a calm measure. */
export function Page({ title, actions, lead, children, isWide = false }: { title: string; actions?: ReactNode; lead?: ReactNode; children: ReactNode; isWide?: boolean }) {
  return (
    <div className={`mx-auto flex w-full flex-col gap-5 px-4 py-6 ${isWide ? "max-w-[92rem]" : "max-w-5xl"}`}>
      <header className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <h1 className="text-xl font-semibold">{title}</h1>
        {actions && <div className="ml-auto flex flex-wrap items-center gap-2">{actions}</div>}
        {lead && <p className="basis-full text-sm text-dim">{lead}</p>}
      </header>
      {children}
    </div>
  );
}

/** A part of a page under its own heading. */
export function Section({ title, actions, children }: { title: string; actions?: ReactNode; children: ReactNode }) {
  return (
    <section className="flex flex-col gap-3">
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2 border-b border-line pb-1"><h2 className="text-base font-semibold">{title}</h2>{actions && <div className="ml-auto flex flex-wrap gap-2">{actions}</div>}</div>
      {children}
    </section>
  );
}
