"use client";
import { memo, type ReactNode } from "react";
import type { Mark } from "@/lib/commands/command";
import type { LineProblem } from "@/lib/commands/entry";

interface Piece { start: number; end: number; mark: Mark | null; problem: LineProblem | null }

/** Cuts the line at every mark and problem, in order, problems first where both claim a stretch. */
function cut(text: string, marks: readonly Mark[], problems: readonly LineProblem[]): Piece[] {
  const claims: Piece[] = [
    ...problems.filter((each) => each.end > each.start).map((problem) => ({ start: problem.start, end: problem.end, mark: null, problem })),
    ...marks.map((mark) => ({ start: mark.start, end: mark.end, mark, problem: null })),
  ];
  const taken: Piece[] = [];
  for (const claim of claims) if (!taken.some((each) => claim.start < each.end && each.start < claim.end)) taken.push(claim);
  taken.sort((a, b) => a.start - b.start);
  const pieces: Piece[] = [];
  let at = 0;
  for (const each of taken) {
    if (each.start > at) pieces.push({ start: at, end: each.start, mark: null, problem: null });
    pieces.push({ ...each, end: Math.min(each.end, text.length) });
    at = each.end;
  }
  if (at < text.length) pieces.push({ start: at, end: text.length, mark: null, problem: null });
  return pieces.filter((piece) => piece.end > piece.start);
}

/**
 * A formula with lowered counts and a raised charge. The glyphs are moved by transforms alone, so that every character
 * keeps its width and the caret of the field above stays where it belongs.
 */
function formulaInPlace(text: string): ReactNode {
  const caret = text.indexOf("^");
  const bare = caret < 0 ? /[A-Za-z)\]\d](\d?[+-])$/.exec(text) : null;
  const chargeFrom = caret >= 0 ? caret + 1 : bare ? text.length - bare[1].length : text.length;
  return [...text].map((letter, index) => {
    if (index === caret) return <span key={index} className="opacity-25">{letter}</span>;
    if (index >= chargeFrom) return <span key={index} className="inline-block origin-left -translate-y-[0.35em] scale-[0.75]">{letter}</span>;
    if (/\d/.test(letter) && index > 0 && /[A-Za-z)\d]/.test(text[index - 1])) return <span key={index} className="inline-block origin-left translate-y-[0.25em] scale-[0.75]">{letter}</span>;
    return letter;
  });
}

const isFormula = (text: string): boolean => /^(?:[A-Z][a-z]?\d*|[()[\]]\d*)+(\^?\d*[+-])?$/.test(text);

const LOOKS: Record<Mark["kind"], string> = {
  command: "text-accent font-semibold", reference: "text-accent", name: "text-ink font-medium", value: "text-ink", unknown: "text-ink",
};

/** Annotations are set at this share of the line's own size. */
const NOTE_SCALE = 0.7;

/** The typed line as read, laid exactly under the transparent text of the field. */
export const PromptMirror = memo(function PromptMirror({ text, marks, problems, hint }: {
  text: string; marks: readonly Mark[]; problems: readonly LineProblem[]; hint: string;
}) {
  const pieces = cut(text, marks, problems);
  return (
    <div aria-hidden="true" className="pointer-events-none whitespace-pre-wrap [overflow-wrap:anywhere]">
      {pieces.map((piece, index) => {
        const shown = text.slice(piece.start, piece.end);
        if (!piece.mark && !piece.problem) return <span key={index} className="text-dim">{shown}</span>;
        const next = pieces.slice(index + 1).find((each) => each.mark?.shown || each.problem);
        const room = (next?.start ?? text.length + 24) - piece.start;
        const note = piece.problem ? (piece.problem.suggestion ? `${piece.problem.suggestion}?` : "?") : piece.mark?.shown;
        const fits = note !== undefined && note.length * NOTE_SCALE < room;
        const look = piece.problem ? "text-ink underline decoration-bad decoration-wavy decoration-1 underline-offset-4" : LOOKS[piece.mark!.kind];
        return (
          <span key={index} className={`relative ${look}`}>
            {piece.mark?.kind === "name" && isFormula(shown) ? formulaInPlace(shown) : shown}
            {fits && (
              <span className={`absolute left-0 top-[1.6rem] whitespace-pre text-[0.7em] font-normal leading-none no-underline ${piece.problem ? "text-bad" : "text-dim"}`}>{note}</span>
            )}
          </span>
        );
      })}
      <span className="text-faint">{hint}</span>
      {/* A last line break needs something behind it to open a line. */}
      {"​"}
    </div>
  );
});
