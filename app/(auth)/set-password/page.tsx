import type { Metadata } from "next";
import { SetPasswordForm } from "@/components/account/set-password-form";

export const metadata: Metadata = { title: "Set a password", referrer: "no-referrer" };

export default function SetPasswordPage() {
  return <SetPasswordForm />;
}
