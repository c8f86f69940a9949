// The one list of tables that drizzle and better-auth's adapter take.
export { account, rateLimit, session, user, verification } from "./accounts";
