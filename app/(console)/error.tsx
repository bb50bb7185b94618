"use client";
import { Failure } from "@/components/shell/failure";

/** A page that failed, inside its frame: the bar and the palette still lead elsewhere. */
export default Failure;
