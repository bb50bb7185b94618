import { signOut } from "next-auth/react";

/** Ends the session on the server and in this browser, then shows the sign-in page. */
export async function leaveSession(): Promise<void> {
  await signOut({ redirect: false });
  location.assign("/sign-in");
}
