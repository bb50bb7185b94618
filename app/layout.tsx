import "@fontsource-variable/jetbrains-mono";
import "./globals.css";
import type { Metadata, Viewport } from "next";
import type { ReactNode } from "react";
import { ThemeKeeper } from "@/components/shell/theme-keeper";

export const metadata: Metadata = { title: { default: "Tufa", template: "%s · Tufa" }, description: "Acid–base state of water analyses: console and API." };
export const viewport: Viewport = { width: "device-width", initialScale: 1 };

/** Before the first paint, so that a dark room is not lit up by a white page; ThemeKeeper sees to it from then on. */
const THEME = `try{var t=localStorage.getItem("tufa:theme");if(t==="dark"||(t!=="light"&&matchMedia("(prefers-color-scheme: dark)").matches))document.documentElement.classList.add("dark")}catch(e){}`;

export default function RootLayout({ children }: { children: ReactNode }) {
  return (
    <html lang="en" suppressHydrationWarning>
      <head><script dangerouslySetInnerHTML={{ __html: THEME }} /></head>
      <body><ThemeKeeper />{children}</body>
    </html>
  );
}
