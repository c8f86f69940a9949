import { defineConfig } from "drizzle-kit";

// drizzle-kit generate --name what_it_is_for
export default defineConfig({
  dialect: "postgresql",
  schema: "./src/schema/tables.ts",
  out: "../../migrations",
});
