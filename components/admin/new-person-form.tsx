"use client";
import { useState, type FormEvent } from "react";
import { Button } from "@/components/ui/button";
import { Field } from "@/components/ui/field";
import { SelectField } from "@/components/ui/select-field";
import { createUser } from "@/lib/client/accounts";
import type { Role } from "@/lib/schemas/actor";
import type { UserCreated } from "@/lib/schemas/api";

export function NewPersonForm({ onMade }: { onMade: (user: UserCreated) => void }) {
  const [name, setName] = useState("");
  const [email, setEmail] = useState("");
  const [role, setRole] = useState<Role>("analyst");
  const [failure, setFailure] = useState("");
  const onSubmit = (event: FormEvent): void => {
    event.preventDefault();
    setFailure("");
    createUser({ name: name.trim(), email: email.trim(), role }).then((user) => { setName(""); setEmail(""); onMade(user); }, (error: unknown) => setFailure(error instanceof Error ? error.message : "The account was not made."));
  };
  return (
    <form onSubmit={onSubmit} aria-label="New person" className="flex flex-wrap items-start gap-4">
      <Field label="Name" required maxLength={120} value={name} onChange={(event) => setName(event.target.value)} className="w-56 max-w-full" />
      <Field label="E-mail" type="email" required maxLength={254} value={email} onChange={(event) => setEmail(event.target.value)} className="w-72 max-w-full" error={failure} />
      <SelectField label="Role" value={role} onChange={(event) => setRole(event.target.value as Role)}><option>analyst</option><option>modeller</option><option>administrator</option></SelectField>
      <Button type="submit" kind="primary" className="mt-6">Make the account</Button>
    </form>
  );
}
