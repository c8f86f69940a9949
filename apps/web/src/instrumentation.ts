/** Runs once when the server starts; what needs Node is loaded only there. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME === "nodejs") await import("./instrumentation-node");
}
