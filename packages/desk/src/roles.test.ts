import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { addMember } from "./add-member";
import { addTeam } from "./add-team";
import { amendCampaign } from "./amend-campaign";
import { amendHypothesis } from "./amend-hypothesis";
import { closeRegistration } from "./close-registration";
import { declareFacility } from "./declare";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { exportAuditTrail } from "./export-audit-trail";
import { importCampaign } from "./import-campaign";
import { listApiKeys } from "./list-api-keys";
import { listCampaigns } from "./list-campaigns";
import { listMembers } from "./list-members";
import { listWebhooks } from "./list-webhooks";
import { makeApiKey } from "./make-api-key";
import { openCampaign } from "./open-campaign";
import { postMeasurements } from "./post-measurements";
import { previewMeasurements } from "./preview-measurements";
import { readCampaign } from "./read-campaign";
import { registerHypothesis } from "./register-hypothesis";
import { revokeApiKey } from "./revoke-api-key";
import { actions, may, permission, roles } from "./roles";
import type { Action, Permission, Role } from "./roles";
import { setAsideMeasurement } from "./set-aside-measurement";
import { citeStandings } from "./cite-standings";
import { correctMeasurement } from "./correct-measurement";
import { makeRemark } from "./make-remark";
import { objectToReference } from "./object-to-reference";
import { openSeal } from "./open-seal";
import { proposeMeasurand } from "./propose-measurand";
import { retireHypothesis } from "./retire-hypothesis";
import { sealMeasurement } from "./seal-measurement";
import { sealPrediction } from "./seal-prediction";
import { withdrawMeasurements } from "./withdraw-measurements";
import { hypothesis, openLagoon, reading } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";

// The roles as the design states them: the coordinator declares, a team's member registers that
// team's hypotheses, members and the coordinator post, everyone reads a public campaign.
const [y, n, o] = ["yes", "no", "own-team"] as const;
// prettier-ignore
const stated: Record<Action, [visitor: Permission, account: Permission, reader: Permission, member: Permission, coordinator: Permission]> = {
  "list-campaigns": [y, y, y, y, y],
  "open-campaign": [n, y, n, n, n],
  "import-campaign": [n, y, n, n, n],
  "read-campaign": [n, n, y, y, y],
  "export-audit-trail": [n, n, y, y, y],
  "list-members": [n, n, n, y, y],
  "register-hypothesis": [n, n, n, o, o],
  "amend-hypothesis": [n, n, n, o, o],
  "preview-measurements": [n, n, n, y, y],
  "post-measurements": [n, n, n, y, y],
  "set-aside-measurement": [n, n, n, o, y],
  "correct-measurement": [n, n, n, o, y],
  "withdraw-measurements": [n, n, n, o, y],
  "retire-hypothesis": [n, n, n, o, o],
  "propose-measurand": [n, n, n, o, o],
  "object-to-reference": [n, n, n, o, o],
  "seal-prediction": [n, n, n, o, o],
  "seal-measurement": [n, n, n, y, y],
  "open-seal": [n, n, n, y, y],
  "make-remark": [n, n, n, y, y],
  "cite-standings": [n, n, n, y, y],
  "make-api-key": [n, n, n, y, y],
  "list-api-keys": [n, n, n, y, y],
  "revoke-api-key": [n, n, n, y, y],
  "amend-campaign": [n, n, n, n, y],
  declare: [n, n, n, n, y],
  "add-team": [n, n, n, n, y],
  "add-member": [n, n, n, n, y],
  "manage-webhooks": [n, n, n, n, y],
  "close-registration": [n, n, n, n, y],
};

const LONG_AGO = "2001-01-01T00:00:00Z";
const DIGEST = "5e".repeat(32);
const kept = { keeping: "kept", digest: DIGEST, measurand: "new-moon" } as const;
const NOTHING = { by: "ids" as const, ids: ["night-9"] };
const SAME = { ...reading("night-1", 41), id: "night-1" };
const TAKEN = { key: "new-moon", observable: "glow" };

describe("the table of roles", () => {
  const cells = actions.flatMap((action) => roles.map((role, i) => ({ action, role, i })));

  it.each(cells)("$action by a $role is as stated", ({ action, role, i }) => {
    const cell = stated[action][i]!;
    expect(permission(role, action)).toBe(cell);
    expect(may(role, action, { own: "a", of: "a" })).toBe(cell !== "no");
    expect(may(role, action, { own: "a", of: "b" })).toBe(cell === "yes");
    expect(may(role, action, { own: null, of: "b" })).toBe(cell === "yes");
  });

  it("gives a member of no team nothing that is a team's, nor anything that is of no team", () => {
    for (const action of actions.filter((each) => permission("member", each) === "own-team")) {
      expect(may("member", action, { own: null, of: null })).toBe(false);
      expect(may("coordinator", action, { own: null, of: null })).toBe(true);
    }
  });

  it("has no action that this test doesn't know", () => {
    expect(Object.keys(stated).sort()).toEqual([...actions].sort());
  });
});

describe("every use-case asks the table", () => {
  let house: TestDesk;
  let open: Lagoon;
  let closed: Lagoon;

  beforeAll(async () => {
    house = await openTestDesk();
    open = await openLagoon(house);
    closed = await openLagoon(house, { key: "lagoon-members", visibility: "members" });
    for (const lagoon of [open, closed]) {
      const { key, member } = lagoon;
      await registerHypothesis(house.desk, member, { key, hypothesis: hypothesis("algae", 40) });
      const source = { from: "drafts" as const, drafts: [reading("night-1", 41)] };
      await postMeasurements(house.desk, member, { key, source });
    }
  });
  afterAll(() => house.close());

  /** Each action as a use-case that would go through, or be refused for another reason than role. */
  const attempts: Record<Action, (desk: Desk, actor: Actor, key: string) => Promise<unknown>> = {
    "list-campaigns": (desk, actor) => listCampaigns(desk, actor, {}),
    "open-campaign": (desk, actor) =>
      openCampaign(desk, actor, { campaign: { key: "lagoon-glow", title: "Taken" } }),
    "import-campaign": (desk, actor) => importCampaign(desk, actor, { text: "{}" }),
    "read-campaign": (desk, actor, key) => readCampaign(desk, actor, { key }),
    "export-audit-trail": (desk, actor, key) => exportAuditTrail(desk, actor, { key }),
    "list-members": (desk, actor, key) => listMembers(desk, actor, { key }),
    "register-hypothesis": (desk, actor, key) =>
      registerHypothesis(desk, actor, {
        key,
        hypothesis: { ...hypothesis("algae", 41), team: "algae" },
      }),
    "amend-hypothesis": (desk, actor, key) =>
      amendHypothesis(desk, actor, { key, hypothesis: hypothesis("algae", 41) }),
    "preview-measurements": (desk, actor, key) =>
      previewMeasurements(desk, actor, { key, source: { from: "csv", text: "" } }),
    "post-measurements": (desk, actor, key) =>
      postMeasurements(desk, actor, { key, source: { from: "csv", text: "" } }),
    "set-aside-measurement": (desk, actor, key) =>
      setAsideMeasurement(desk, actor, { key, id: "night-1", reason: "clouds" }),
    "correct-measurement": (desk, actor, key) =>
      correctMeasurement(desk, actor, { key, measurement: SAME, reason: "none" }),
    "withdraw-measurements": (desk, actor, key) =>
      withdrawMeasurements(desk, actor, { key, selection: NOTHING, reason: "clouds" }),
    "retire-hypothesis": (desk, actor, key) =>
      retireHypothesis(desk, actor, { key, hypothesis: "algae", reason: "r" }),
    "propose-measurand": (desk, actor, key) =>
      proposeMeasurand(desk, actor, { key, measurand: TAKEN, reason: "r" }),
    "object-to-reference": (desk, actor, key) =>
      objectToReference(desk, actor, { key, measurand: "no-moon", reason: "r" }),
    "seal-prediction": (desk, actor, key) =>
      sealPrediction(desk, actor, { key, hypothesis: "algae", until: LONG_AGO, seal: kept }),
    "seal-measurement": (desk, actor, key) =>
      sealMeasurement(desk, actor, { key, until: LONG_AGO, seal: kept }),
    "open-seal": (desk, actor, key) =>
      openSeal(desk, actor, { key, digest: DIGEST, nonce: DIGEST, content: {} }),
    "make-remark": (desk, actor, key) =>
      makeRemark(desk, actor, { key, on: 9_999, kind: "question", text: "?" }),
    "cite-standings": (desk, actor, key) => citeStandings(desk, actor, { key, note: "a paper" }),
    "make-api-key": (desk, actor, key) =>
      makeApiKey(desk, actor, { key, title: "a pipeline", scopes: ["read"] }),
    "list-api-keys": (desk, actor, key) => listApiKeys(desk, actor, { key }),
    "revoke-api-key": (desk, actor, key) => revokeApiKey(desk, actor, { key, id: "none" }),
    "amend-campaign": (desk, actor, key) =>
      amendCampaign(desk, actor, {
        key,
        campaign: { key: "another", title: "Another", visibility: "public" },
      }),
    declare: (desk, actor, key) => declareFacility(desk, actor, { key, facility: { key: "pier" } }),
    "add-team": (desk, actor, key) => addTeam(desk, actor, { key, team: { key: "algae" } }),
    "add-member": (desk, actor, key) =>
      addMember(desk, actor, { key, email: "nobody@people.example", role: "reader" }),
    "manage-webhooks": (desk, actor, key) => listWebhooks(desk, actor, { key }),
    "close-registration": (desk, actor, key) => closeRegistration(desk, actor, { key }),
  };

  const whole = ["list-campaigns", "open-campaign", "import-campaign"];

  /** What a use-case says of the actor's role: let through, whatever it said of the rest. */
  async function refusal(action: Action, actor: Actor, key: string): Promise<string | null> {
    try {
      await attempts[action](house.desk, actor, key);
      return null;
    } catch (error) {
      if (!(error instanceof DeskError)) throw error;
      const ofRole = ["not-signed-in", "not-allowed"].includes(error.code);
      const hidden = error.code === "not-found" && error.message.includes("found no campaign");
      return ofRole || hidden ? error.code : null;
    }
  }

  /** Who holds which role where, and what a refusal looks like there. */
  const holders: [Role, () => Actor, () => string, refused: string][] = [
    ["visitor", () => null, () => closed.key, "not-found"],
    ["account", () => closed.stranger, () => closed.key, "not-found"],
    ["reader", () => open.reader, () => open.key, "not-allowed"],
    ["reader", () => closed.reader, () => closed.key, "not-allowed"],
    ["reader", () => open.stranger, () => open.key, "not-allowed"],
    ["reader", () => null, () => open.key, "not-signed-in"],
    ["member", () => open.member, () => open.key, "not-allowed"],
    ["coordinator", () => open.coordinator, () => open.key, "not-allowed"],
  ];

  const cells = holders.flatMap(([role, actor, key, refused]) =>
    actions.map((action) => ({ role, actor, key, refused, action })),
  );

  it.each(cells)("$action by a $role", async ({ role, actor, key, refused, action }) => {
    const who = actor();
    const said = await refusal(action, who, key());
    if (whole.includes(action)) {
      // These concern no campaign: only whether there is an account matters.
      expect(said).toBe(who === null && action !== "list-campaigns" ? "not-signed-in" : null);
      return;
    }
    const cell = permission(role, action);
    const ownTeam = role === "member";
    const letThrough = cell === "yes" || (cell === "own-team" && ownTeam);
    expect(said).toBe(letThrough ? null : refused);
  });

  it("another team's member may neither amend nor register for it, nor set aside its measurements", async () => {
    const { key, rival } = open;
    const { desk } = house;
    const forOthers = { ...hypothesis("algae-2", 1), team: "algae" };
    const refusedCalls = [
      () => registerHypothesis(desk, rival, { key, hypothesis: forOthers }),
      () => amendHypothesis(desk, rival, { key, hypothesis: hypothesis("algae", 3) }),
      () => setAsideMeasurement(desk, rival, { key, id: "night-1", reason: "clouds" }),
    ];
    for (const call of refusedCalls) {
      await expect(call()).rejects.toMatchObject({ code: "not-allowed" });
    }
  });
});
