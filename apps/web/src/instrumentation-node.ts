import { closing } from "@weighhouse/api/closing";

// Open event streams would keep the server from exiting for as long as somebody watches.
for (const signal of ["SIGTERM", "SIGINT"] as const) {
  process.once(signal, () => closing.abort());
}
