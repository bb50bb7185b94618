/** How far something has come, as a thin bar. */
export function ProgressBar({ label, done, of }: { label: string; done: number; of: number }) {
  return (
    <div role="progressbar" aria-label={label} aria-valuemin={0} aria-valuemax={of} aria-valuenow={done} className="mt-0.5 h-1 w-24 overflow-hidden rounded bg-line">
      <div className="h-full bg-accent transition-[width] duration-200" style={{ width: `${of === 0 ? 0 : (100 * done) / of}%` }} />
    </div>
  );
}
