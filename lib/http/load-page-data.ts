import { notFound } from "next/navigation";
import { AppError } from "@/lib/errors";

/** For server pages: what a service finds, or the page that says that nothing stands here. */
export async function loadOrNotFound<T>(found: Promise<T>): Promise<T> {
  try {
    return await found;
  } catch (error) {
    if (error instanceof AppError && error.code === "not-found") notFound();
    throw error;
  }
}
