"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { useForm } from "react-hook-form";
import { Button } from "@/look/button";
import { Field } from "@/look/field";
import { Notice } from "@/look/notice";
import { authClient } from "./auth-client";
import { signInSchema } from "./credentials";

export function SignInForm({ next }: { next: string }) {
  const [refusal, setRefusal] = useState<string | null>(null);
  const form = useForm({
    resolver: zodResolver(signInSchema),
    defaultValues: { email: "", password: "" },
  });
  const { errors, isSubmitting } = form.formState;
  const signIn = form.handleSubmit(async (values) => {
    const { error } = await authClient.signIn.email(values);
    if (error) {
      setRefusal(error.message ?? `The server answered ${error.status}`);
      return;
    }
    // A whole page load: all that was fetched as nobody is let go.
    window.location.assign(next);
  });
  return (
    <form onSubmit={signIn} noValidate className="max-w-md">
      {refusal ? (
        <Notice tone="bad" role="alert" label="Not signed in.">
          {refusal}
        </Notice>
      ) : null}
      <Field
        label="E-mail address"
        type="email"
        autoComplete="email"
        error={errors.email?.message}
        {...form.register("email")}
      />
      <Field
        label="Password"
        type="password"
        autoComplete="current-password"
        error={errors.password?.message}
        {...form.register("password")}
      />
      <Button type="submit" kind="main" disabled={isSubmitting}>
        {isSubmitting ? "Signing in" : "Sign in"}
      </Button>
    </form>
  );
}
