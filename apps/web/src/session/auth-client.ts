import { createAuthClient } from "better-auth/react";

/** Signing up, in and out, by e-mail address and password, against `/api/auth` of this server. */
export const authClient = createAuthClient();
