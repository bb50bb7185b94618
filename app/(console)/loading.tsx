/** Stands while the server gathers a page; the bar and the palette work already. */
export default function Loading() {
  return <p role="status" className="px-4 py-6 text-sm text-dim">Reading …</p>;
}
