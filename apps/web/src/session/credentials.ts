import { z } from "zod";

/** What one types to sign in; the words say what is allowed. */
export const signInSchema = z.object({
  email: z.email("An e-mail address is allowed, such as name@example.org"),
  password: z.string().min(1, "The password is missing"),
});

export const signUpSchema = z.object({
  name: z
    .string()
    .trim()
    .min(1, "A name is missing")
    .max(100, "100 characters at most are allowed"),
  email: signInSchema.shape.email,
  password: z
    .string()
    .min(10, "10 characters or more are allowed")
    .max(128, "128 characters at most are allowed"),
});

/** Where to go after signing in: a path of this site, never another's address. */
export function safeNext(next: string | string[] | undefined): string {
  const path = Array.isArray(next) ? next[0] : next;
  return path && /^\/(?![/\\])/.test(path) ? path : "/campaigns";
}
