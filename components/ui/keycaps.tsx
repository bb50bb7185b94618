/** A shortcut as keycaps. */
export function KeycapRow({ caps }: { caps: readonly string[] }) {
  return (
    <span className="ml-2 inline-flex gap-1 align-baseline">
      {caps.map((cap, index) => <kbd key={index} className="rounded border border-line bg-raised px-1 text-[0.7rem] leading-4 text-dim">{cap}</kbd>)}
    </span>
  );
}
