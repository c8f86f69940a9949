import { betterAuth } from "better-auth";
import { drizzleAdapter } from "better-auth/adapters/drizzle";
import * as schema from "@weighhouse/store/schema/accounts";
import type { Store } from "@weighhouse/store/open-store";

export type AuthOptions = {
  store: Store;
  /** Where people reach this server, such as `http://localhost:3000`. */
  origin: string;
  /** Signs sessions: 32 characters or more, the same in every process. */
  secret: string;
};

export type Auth = ReturnType<typeof createAuth>;

const MIN_PASSWORD_LENGTH = 10;

/** From one address, counted for all processes together; a team behind one router must fit in. */
const SIGN_INS_PER_MINUTE = 30;

/** Accounts by e-mail and password, and their sessions, in the store's own tables. */
export function createAuth({ store, origin, secret }: AuthOptions) {
  return betterAuth({
    appName: "Weighhouse",
    baseURL: origin,
    basePath: "/api/auth",
    secret,
    database: drizzleAdapter(store.db, { provider: "pg", schema, transaction: true }),
    emailAndPassword: {
      enabled: true,
      autoSignIn: true,
      minPasswordLength: MIN_PASSWORD_LENGTH,
      maxPasswordLength: 128,
    },
    session: { expiresIn: 30 * 24 * 3600, updateAge: 24 * 3600 },
    trustedOrigins: (request) => trustedOrigins(origin, request),
    rateLimit: {
      enabled: true,
      storage: "database",
      window: 60,
      max: 300,
      customRules: {
        "/sign-in/email": { window: 60, max: SIGN_INS_PER_MINUTE },
        "/sign-up/email": { window: 60, max: SIGN_INS_PER_MINUTE },
      },
    },
    advanced: {
      cookiePrefix: "weighhouse",
      // A Secure cookie never comes back over plain HTTP, as on a laptop or in a local network.
      useSecureCookies: origin.startsWith("https://"),
      // Said outright: by default the library leaves both checks out where NODE_ENV is "test".
      disableOriginCheck: false,
      disableCSRFCheck: false,
      defaultCookieAttributes: { httpOnly: true, sameSite: "lax", path: "/" },
    },
    telemetry: { enabled: false },
    logger: {
      level: "warn",
      log: (level, message) => store.log[level === "error" ? "error" : "warn"]({}, message),
    },
  });
}

/**
 * Over plain HTTP a server is reached by several names (localhost, a host's name, an address in the
 * local network): a request is of the same origin when it comes from the host that it goes to.
 * Behind HTTPS only the one stated origin is.
 */
export function trustedOrigins(origin: string, request: Request | undefined): string[] {
  const host = request?.headers.get("host");
  return host && origin.startsWith("http://") ? [origin, `http://${host}`] : [origin];
}
