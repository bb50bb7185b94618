// @vitest-environment jsdom
import { cleanup, createEvent, fireEvent, render, screen } from "@testing-library/react";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { Prompt } from "@/components/console/prompt";
import { answeredWater, consoleView } from "./commands-fixtures";

// jsdom has no execCommand: the prompt then writes into the field itself, which is what is seen here.
beforeEach(() => { document.execCommand = () => false; });
afterEach(cleanup);

function shown(history: string[] = []) {
  const onRun = vi.fn();
  const onKeysWanted = vi.fn();
  render(<Prompt view={consoleView({ entries: [answeredWater(1)] })} history={history} onRun={onRun} onKeysWanted={onKeysWanted} onDrop={vi.fn()} />);
  const field = screen.getByRole<HTMLTextAreaElement>("textbox");
  const type = (text: string): void => {
    field.value = text;
    field.setSelectionRange(text.length, text.length);
    fireEvent.input(field);
  };
  return { field, type, onRun, onKeysWanted };
}

describe("the prompt", () => {
  it("runs a sound line on Enter and is empty again", () => {
    const { field, type, onRun } = shown();
    type("try calcite");
    fireEvent.keyDown(field, { key: "Enter" });
    expect(onRun).toHaveBeenCalledWith("try calcite", expect.objectContaining({ kind: "command" }));
    expect(field.value).toBe("");
  });

  it("never runs on the Enter of an input method", () => {
    const { field, type, onRun } = shown();
    type("try calcite");
    fireEvent.keyDown(field, { key: "Enter", isComposing: true });
    fireEvent.keyDown(field, { key: "Enter", keyCode: 229 });
    expect(onRun).not.toHaveBeenCalled();
    expect(field.value).toBe("try calcite");
  });

  it("keeps a faulty line whole and says what is wrong with which word", () => {
    const { field, type, onRun } = shown();
    type("try calcit, open");
    fireEvent.keyDown(field, { key: "Enter" });
    expect(onRun).not.toHaveBeenCalled();
    expect(field.value).toBe("try calcit, open");
    expect(screen.getByRole("alert").textContent).toContain("calcit");
    expect(field.getAttribute("aria-invalid")).toBe("true");
  });

  it("lets Tab move the focus where there is nothing to complete, and completes where there is", () => {
    const { field, type } = shown();
    const onEmpty = createEvent.keyDown(field, { key: "Tab" });
    fireEvent(field, onEmpty);
    expect(onEmpty.defaultPrevented).toBe(false);
    type("rang");
    const onWord = createEvent.keyDown(field, { key: "Tab" });
    fireEvent(field, onWord);
    expect(onWord.defaultPrevented).toBe(true);
  });

  it("shows the keys on ? in an empty prompt only", () => {
    const { field, type, onKeysWanted } = shown();
    type("Ca ");
    fireEvent.keyDown(field, { key: "?", shiftKey: true });
    expect(onKeysWanted).not.toHaveBeenCalled();
    type("");
    fireEvent.keyDown(field, { key: "?", shiftKey: true });
    expect(onKeysWanted).toHaveBeenCalledOnce();
  });

  it("leaves Ctrl+C alone while something is selected", () => {
    const { field, type } = shown();
    type("Ca 62 mg/L");
    field.setSelectionRange(0, 2);
    const copy = createEvent.keyDown(field, { key: "c", ctrlKey: true });
    fireEvent(field, copy);
    expect(copy.defaultPrevented).toBe(false);
    expect(field.value).toBe("Ca 62 mg/L");
  });

  it("goes back through earlier lines and returns to the one being written", () => {
    const { field, type } = shown(["jobs", "sets"]);
    type("he");
    fireEvent.keyDown(field, { key: "ArrowUp" });
    expect(field.value).toBe("sets");
    fireEvent.keyDown(field, { key: "ArrowUp" });
    expect(field.value).toBe("jobs");
    fireEvent.keyDown(field, { key: "ArrowDown" });
    fireEvent.keyDown(field, { key: "ArrowDown" });
    expect(field.value).toBe("he");
  });
});
