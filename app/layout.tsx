import "@fontsource-variable/jetbrains-mono";
import "./globals.css";
import type { Metadata, Viewport } from "next";
import type { ReactNode } from "react";

export const metadata: Metadata = { title: { default: "Tufa", template: "%s · Tufa" }, description: "Acid–base state of water analyses: console and API." };
export const viewport: Viewport = { width: "device-width", initialScale: 1 };

/** Before the first paint, so that a dark room is not lit up by a white page; afterwards it follows the system and the other tabs. */
const THEME = `(function(){var night=matchMedia("(prefers-color-scheme: dark)");function paint(){var t=null;try{t=localStorage.getItem("tufa:theme")}catch(e){}document.documentElement.classList.toggle("dark",t==="dark"||(t!=="light"&&night.matches))}paint();night.addEventListener("change",paint);addEventListener("storage",paint)})()`;

export default function RootLayout({ children }: { children: ReactNode }) {
  return (
    <html lang="en" suppressHydrationWarning>
      <head><script dangerouslySetInnerHTML={{ __html: THEME }} /></head>
      <body>{children}</body>
    </html>
  );
}
