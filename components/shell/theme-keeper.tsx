"use client";
import { useLayoutEffect } from "react";
import { applyTheme, keptTheme } from "@/lib/client/theme";

const paint = (): void => applyTheme(keptTheme());

/**
 * Keeps the page in the chosen colours: when the system changes, when another tab chooses, and when React makes the document anew (it does
 * for pages that are not found), which loses the class that the script in the head had set.
 */
export function ThemeKeeper() {
  useLayoutEffect(() => {
    paint();
    const night = matchMedia("(prefers-color-scheme: dark)");
    night.addEventListener("change", paint);
    addEventListener("storage", paint);
    return () => { night.removeEventListener("change", paint); removeEventListener("storage", paint); };
  }, []);
  return null;
}
