import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { SignInForm } from "@/components/account/sign-in-form";
import { pageActor } from "@/lib/http/page-auth";
import { demoAccounts } from "@/lib/services/users/demo-people";

export const metadata: Metadata = { title: "Sign in" };

export default async function SignInPage() {
  if (await pageActor()) redirect("/");
  return <SignInForm demo={demoAccounts()} />;
}
