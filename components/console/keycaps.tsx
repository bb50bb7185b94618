"use client";
import { KeycapRow } from "@/components/ui/keycaps";
import { useKeycaps } from "@/lib/commands/use-keycaps";

/** The keys of a combo as this machine calls them. */
export function Keycaps({ combo }: { combo: string }) {
  return <KeycapRow caps={useKeycaps(combo)} />;
}
