"use client";
import { useEffect, type RefObject } from "react";

/**
 * Keeps what is announced equal to what is highlighted: cmdk renews aria-activedescendant only when the value changes
 * by key, not when filtering moves it (its issue 413). The attribute is set from the selected option after each change.
 */
export function useHonestHighlight(root: RefObject<HTMLElement | null>, isOpen: boolean): void {
  useEffect(() => {
    const box = root.current;
    if (!isOpen || !box) return;
    const settle = (): void => {
      const input = box.querySelector("[cmdk-input]");
      const id = box.querySelector("[cmdk-item][aria-selected=true]")?.id ?? "";
      if (input && (input.getAttribute("aria-activedescendant") ?? "") !== id) {
        if (id) input.setAttribute("aria-activedescendant", id);
        else input.removeAttribute("aria-activedescendant");
      }
    };
    const observer = new MutationObserver(settle);
    observer.observe(box, { subtree: true, childList: true, attributes: true, attributeFilter: ["aria-selected", "aria-activedescendant"] });
    settle();
    return () => observer.disconnect();
  }, [root, isOpen]);
}
