"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { useForm } from "react-hook-form";
import { Button } from "@/look/button";
import { Field } from "@/look/field";
import { Notice } from "@/look/notice";
import { authClient } from "./auth-client";
import { signUpSchema } from "./credentials";

export function SignUpForm({ next }: { next: string }) {
  const [refusal, setRefusal] = useState<string | null>(null);
  const form = useForm({
    resolver: zodResolver(signUpSchema),
    defaultValues: { name: "", email: "", password: "" },
  });
  const { errors, isSubmitting } = form.formState;
  const signUp = form.handleSubmit(async (values) => {
    const { error } = await authClient.signUp.email(values);
    if (error) {
      setRefusal(error.message ?? `The server answered ${error.status}`);
      return;
    }
    // A whole page load: all that was fetched as nobody is let go.
    window.location.assign(next);
  });
  return (
    <form onSubmit={signUp} noValidate className="max-w-md">
      {refusal ? (
        <Notice tone="bad" role="alert" label="No account was made.">
          {refusal}
        </Notice>
      ) : null}
      <Field
        label="Name"
        help="As your colleagues know you. It is kept beside the ledger, never in it."
        autoComplete="name"
        error={errors.name?.message}
        {...form.register("name")}
      />
      <Field
        label="E-mail address"
        type="email"
        autoComplete="email"
        error={errors.email?.message}
        {...form.register("email")}
      />
      <Field
        label="Password"
        gloss="10 characters or more"
        type="password"
        autoComplete="new-password"
        error={errors.password?.message}
        {...form.register("password")}
      />
      <Button type="submit" kind="main" disabled={isSubmitting}>
        {isSubmitting ? "Making the account" : "Make the account"}
      </Button>
    </form>
  );
}
