export type Theme = "dark" | "light" | "system";

/** Where the choice is kept; the root layout reads it before the first paint. */
export const THEME_KEY = "tufa:theme";

/** The choice of this browser; the system's where none was made, or storage is shut. */
export function keptTheme(): Theme {
  try {
    const kept = localStorage.getItem(THEME_KEY);
    return kept === "dark" || kept === "light" ? kept : "system";
  } catch {
    return "system";
  }
}

export function applyTheme(theme: Theme): void {
  const isDark = theme === "dark" || (theme === "system" && matchMedia("(prefers-color-scheme: dark)").matches);
  document.documentElement.classList.toggle("dark", isDark);
}

/** Chooses and remembers the theme of this browser. */
export function chooseTheme(theme: Theme): void {
  localStorage.setItem(THEME_KEY, theme);
  applyTheme(theme);
}
