import type { Config } from "tailwindcss";

const NAMES = ["page", "raised", "sunken", "line", "ink", "dim", "faint", "accent", "on-accent", "water", "good", "warn", "bad", "select", "mark", "focus", "scrim"];

export default {
  content: ["./app/**/*.{ts,tsx}", "./components/**/*.{ts,tsx}"],
  darkMode: "class",
  theme: {
    extend: {
      // The values stand in app/globals.css, once for light and once for dark.
      colors: Object.fromEntries(NAMES.map((name) => [name, `var(--${name})`])),
      fontFamily: { mono: ["JetBrains Mono Variable", "JetBrains Mono", "ui-monospace", "monospace"], sans: ["JetBrains Mono Variable", "JetBrains Mono", "ui-monospace", "monospace"] },
    },
  },
} satisfies Config;
