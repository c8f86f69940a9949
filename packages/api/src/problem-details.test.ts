import { expect, it } from "vitest";
import { DeskError, invalid } from "@weighhouse/desk/desk-error";
import { silentLog } from "@weighhouse/store/log";
import { ApiError } from "./http/api-error";
import { problemResponse } from "./problem-details";

it.each([
  ["not-signed-in", 401, { "www-authenticate": "Bearer" }],
  ["not-allowed", 403, {}],
  ["insufficient-scope", 403, { "www-authenticate": 'Bearer error="insufficient_scope"' }],
  ["not-found", 404, {}],
  ["conflict", 409, {}],
  ["closed", 412, {}],
  ["busy", 503, { "retry-after": "1" }],
] as const)(
  "the desk's %s is %i with the fields that it asks for",
  async (code, status, fields) => {
    const response = problemResponse(new DeskError(code, "found this; allowed that"), silentLog);
    expect(response.status).toBe(status);
    for (const [name, value] of Object.entries(fields)) {
      expect(response.headers.get(name)).toBe(value);
    }
    expect(response.headers.get("content-type")).toBe("application/problem+json");
    expect(await response.json()).toMatchObject({ type: "about:blank", status, code });
  },
);

it("what is wrong with the input is told place by place", async () => {
  const problem = { pointer: "/sd", code: "not-positive", found: "-1", allowed: "> 0" } as const;
  const response = problemResponse(invalid([problem]), silentLog);
  expect(await response.json()).toMatchObject({ status: 422, problems: [problem] });
});

it("a refusal of HTTP itself brings its own fields", () => {
  const error = new ApiError("method-not-allowed", "found PUT; allowed GET", { allow: "GET" });
  const response = problemResponse(error, silentLog);
  expect([response.status, response.headers.get("allow")]).toEqual([405, "GET"]);
});

it("what nobody foresaw is told in no words of its own, and logged", async () => {
  const lines: string[] = [];
  const note = (fields: object) => void lines.push(JSON.stringify(fields));
  const log = { info: note, warn: note, error: note };
  const response = problemResponse(new Error("password of the database: hush"), log);
  expect(response.status).toBe(500);
  expect(await response.text()).not.toContain("hush");
  expect(lines.join("")).toContain("hush");
});
