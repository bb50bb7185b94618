/** The name with a mark of its own: layers of stone, the lowest one wet. */
export function Wordmark({ className = "" }: { className?: string }) {
  return (
    <span className={`inline-flex items-center gap-2 font-semibold tracking-tight ${className}`}>
      <svg viewBox="0 0 20 20" width="18" height="18" aria-hidden="true">
        <path d="M2 5.5c3-2 5 1 8-.5s5-1 8 .5" fill="none" stroke="var(--dim)" strokeWidth="2" strokeLinecap="round" />
        <path d="M2 10.5c3-2 5 1 8-.5s5-1 8 .5" fill="none" stroke="var(--dim)" strokeWidth="2" strokeLinecap="round" />
        <path d="M2 15.5c3-2 5 1 8-.5s5-1 8 .5" fill="none" stroke="var(--accent)" strokeWidth="2.4" strokeLinecap="round" />
      </svg>
      Tufa
    </span>
  );
}
