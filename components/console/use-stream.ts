"use client";
import { useCallback, useEffect, useMemo, useReducer, useRef } from "react";
import type { Entry, EntryBody } from "@/lib/commands/entry";
import { keepStream, loadStream, type StoredStream } from "@/lib/commands/stream-memory";

interface State extends StoredStream {
  /** What `clear` took away, newest last, each with the entries it held. */
  cleared: Entry[][];
  isLoaded: boolean;
}

type Change =
  | { do: "load"; stream: StoredStream }
  | { do: "add"; entry: Entry }
  | { do: "answer"; number: number; body: EntryBody }
  | { do: "clear"; numbers: readonly number[] | "all" }
  | { do: "undo" };

function change(state: State, action: Change): State {
  switch (action.do) {
    case "load": return { ...state, ...action.stream, isLoaded: true };
    case "add": return { ...state, entries: [...state.entries, action.entry], nextNumber: Math.max(state.nextNumber, action.entry.number + 1) };
    case "answer": return { ...state, entries: state.entries.map((entry) => (entry.number === action.number ? { ...entry, body: action.body } : entry)) };
    case "clear": {
      const goes = (entry: Entry): boolean => action.numbers === "all" || action.numbers.includes(entry.number);
      const gone = state.entries.filter(goes);
      return gone.length === 0 ? state : { ...state, entries: state.entries.filter((entry) => !goes(entry)), cleared: [...state.cleared, gone].slice(-20) };
    }
    case "undo": {
      const back = state.cleared[state.cleared.length - 1];
      if (!back) return state;
      const entries = [...state.entries, ...back].sort((a, b) => a.number - b.number);
      return { ...state, entries, cleared: state.cleared.slice(0, -1) };
    }
  }
}

export interface Stream {
  entries: readonly Entry[];
  isLoaded: boolean;
  undoable: number;
  /** The state as of the last change, for code that runs between renders. */
  now(): { entries: readonly Entry[]; undoable: number };
  add(line: string, body: EntryBody): number;
  answer(number: number, body: EntryBody): void;
  clear(numbers: readonly number[] | "all"): number;
  undo(): number;
}

/** Written at most this often; the last state is written when the page is left. */
const KEEP_EVERY_MS = 400;

/** The stream of one person's console, kept in this browser over reloads. */
export function useStream(userId: string): Stream {
  const [state, dispatch] = useReducer(change, { entries: [], nextNumber: 1, cleared: [], isLoaded: false });
  const latest = useRef(state);
  const act = useCallback((action: Change): void => {
    // Two changes in one tick must see each other: the ref runs ahead of React's render.
    latest.current = change(latest.current, action);
    dispatch(action);
  }, []);

  useEffect(() => { act({ do: "load", stream: loadStream(localStorage, userId) }); }, [act, userId]);

  useEffect(() => {
    if (!state.isLoaded) return;
    const keep = (): void => keepStream(localStorage, userId, { entries: [...latest.current.entries], nextNumber: latest.current.nextNumber });
    const timer = setTimeout(keep, KEEP_EVERY_MS);
    window.addEventListener("pagehide", keep);
    return () => { clearTimeout(timer); window.removeEventListener("pagehide", keep); };
  }, [state.entries, state.isLoaded, userId]);

  return useMemo<Stream>(() => ({
    entries: state.entries, isLoaded: state.isLoaded, undoable: state.cleared.length,
    now: () => ({ entries: latest.current.entries, undoable: latest.current.cleared.length }),
    add(line, body) {
      const number = latest.current.nextNumber;
      act({ do: "add", entry: { number, at: new Date().toISOString(), line, body } });
      return number;
    },
    answer: (number, body) => act({ do: "answer", number, body }),
    clear(numbers) {
      const before = latest.current.entries.length;
      act({ do: "clear", numbers });
      return before - latest.current.entries.length;
    },
    undo() {
      const before = latest.current.entries.length;
      act({ do: "undo" });
      return latest.current.entries.length - before;
    },
  }), [state, act]);
}
