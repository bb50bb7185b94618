"use client";
import { useState } from "react";
import { Button } from "./button";

/** Copies a text and says so. */
export function CopyButton({ text, label = "Copy" }: { text: string; label?: string }) {
  const [said, setSaid] = useState("");
  const copy = (): void => { navigator.clipboard.writeText(text).then(() => setSaid("Copied"), () => setSaid("The clipboard refused")); };
  return <Button onClick={copy}>{label}<span role="status" className={said ? "text-dim" : "sr-only"}>{said}</span></Button>;
}
