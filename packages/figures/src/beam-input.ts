import type { Standings } from "@weighhouse/campaign/standings";
import type { BeamInput } from "./beam";

/**
 * What hangs on the beam, from the standings. The error of log10 B against the leader is that of
 * both evidences, in quadrature; the no-model mark hangs at its evidence against the leader's.
 *
 * @param titleOf a hypothesis's title by its key
 */
export function beamInput(standings: Standings, titleOf: (key: string) => string): BeamInput {
  const leader = standings.hypotheses[0];
  const noModel = standings.noModel.lnEvidence;
  return {
    hypotheses: standings.hypotheses.map((standing, index) => ({
      key: standing.key,
      title: titleOf(standing.key),
      log10BayesFactor: standing.log10BayesFactor,
      error:
        index === 0
          ? 0
          : Math.hypot(standing.lnEvidenceError, leader?.lnEvidenceError ?? 0) / Math.LN10,
      note: standing.silent > 0 ? `silent on ${standing.silent}` : null,
    })),
    noModel:
      noModel === null || leader === undefined || leader.lnEvidence === null
        ? null
        : { log10BayesFactor: (noModel - leader.lnEvidence) / Math.LN10, lnEvidence: noModel },
    noneDescribes: standings.warnings.some(({ code }) => code === "every-hypothesis-fails"),
  };
}
