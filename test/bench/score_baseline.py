"""The baseline of the large document's benchmark: numpy scores it by the engine's algebra.

Reads a campaign document of constants with standard deviations, shared errors drawn once, scatter,
normal tolerances (common or each) and uniform or normal references; writes the standings document's
numbers: evidences, chi-squares, Bayes factors, posteriors, common grounds, conformances and
combined values. Sums per measurand and shared error first, then one small Cholesky per hypothesis
(Woodbury's identity); flat levels over the whole line, where bounds cut off nothing.

Usage: python3 score_baseline.py CAMPAIGN.json > STANDINGS.json
"""
import json
import math
import sys

import numpy as np


def read(path):
    with open(path, encoding="utf-8") as file:
        return json.load(file)


def columns(document, measurands, errors):
    """The measurements as arrays; a measurement loads at most one shared error here."""
    rows = document["measurements"]
    count = len(rows)
    seen = set()
    for row in rows:
        if row["id"] in seen:
            raise SystemExit(f"the id {row['id']} stands twice")
        seen.add(row["id"])
    measurand = np.fromiter((measurands[row["measurand"]] for row in rows), np.int64, count)
    y = np.fromiter((row["value"] for row in rows), float, count)
    sd = np.fromiter((row["sd"] for row in rows), float, count)
    if not (np.isfinite(y).all() and (sd > 0).all()):
        raise SystemExit("a value that isn't finite, or an sd that isn't above 0")
    error = np.fromiter((errors[row["shared"][0]["error"]] for row in rows), np.int64, count)
    load = np.fromiter((row["shared"][0].get("coefficient", 1) for row in rows), float, count)
    return measurand, y, sd, error, load


class Sums:
    """Per measurand and noise class: ln norm, and the quadratic form in (level, draws)."""

    def __init__(self, document):
        self.measurands = {one["key"]: i for i, one in enumerate(document["measurands"])}
        self.errors = {one["key"]: i for i, one in enumerate(document["sharedErrors"])}
        self.measurand, y, self.sd, self.error, load = columns(
            document, self.measurands, self.errors
        )
        scale = np.array([one["sd"] for one in document["sharedErrors"]])
        self.load = load * scale[self.error]
        self.scatter = np.array([one.get("scatter", 0.0) for one in document["measurands"]])
        self.many = len(self.measurands)
        self.draws = len(self.errors)
        first = np.full(self.many, -1)
        first[self.measurand[::-1]] = np.arange(len(y))[::-1]
        self.centre = np.where(first >= 0, y[first], 0.0)
        self.y = y - self.centre[self.measurand]
        self.counted = np.bincount(self.measurand, minlength=self.many)
        self.cache = {}

    def of(self, m, noise):
        """(lambda, right, square, ln norm) over the unknowns (level, draws) of one measurand."""
        key = (m, noise)
        if key not in self.cache:
            if noise not in self.cache:
                self.cache[noise] = self.all(noise)
            weight, mean, square, log_norm = (part[m] for part in self.cache[noise])
            size = 1 + self.draws
            matrix = np.zeros((size, size))
            loads, totals, cross = weight
            matrix[0, 0] = totals.sum()
            matrix[0, 1:] = matrix[1:, 0] = loads
            matrix[range(1, size), range(1, size)] = cross
            right = np.concatenate(([mean[0].sum()], mean[1]))
            self.cache[key] = (matrix, right, square, log_norm)
        return self.cache[key]

    def all(self, noise):
        variance = self.sd**2 + self.scatter[self.measurand] ** 2 + noise
        weight = 1 / variance
        place = self.measurand * self.draws + self.error
        shape = (self.many, self.draws)

        def total(values):
            return np.bincount(place, values, minlength=self.many * self.draws).reshape(shape)

        totals = total(weight)
        loads = total(weight * self.load)
        cross = total(weight * self.load**2)
        mean = total(weight * self.y)
        mean_load = total(weight * self.load * self.y)
        square = total(weight * self.y**2).sum(axis=1)
        log_norm = -0.5 * total(np.log(variance)).sum(axis=1)
        return list(zip(loads, totals, cross)), list(zip(mean, mean_load)), square, log_norm


def evidence(sums, roles):
    """ln Z and chi-square of {measurand: (kind, mean, sd, noise, width)}."""
    measured = [m for m in sorted(roles) if sums.counted[m] > 0]
    size = len(measured) + sums.draws
    matrix = np.zeros((size, size))
    right = np.zeros(size)
    constant = square = 0.0
    prior = np.ones(size)
    for i, m in enumerate(measured):
        kind, mean, sd, noise, width = roles[m]
        own, own_right, own_square, log_norm = sums.of(m, noise)
        shift = mean - sums.centre[m] if kind == "normal" else 0.0
        own_right, own_square = (
            own_right - own[0] * shift,
            own_square - 2 * shift * own_right[0] + shift * shift * own[0, 0],
        )
        scale = sd if kind == "normal" else 1.0
        matrix[i, i] = own[0, 0] * scale * scale
        matrix[i, len(measured) :] = matrix[len(measured) :, i] = own[0, 1:] * scale
        matrix[len(measured) :, len(measured) :] += own[1:, 1:]
        right[i] = own_right[0] * scale
        right[len(measured) :] += own_right[1:]
        square += own_square
        constant += log_norm - 0.5 * sums.counted[m] * math.log(2 * math.pi)
        if kind == "uniform":
            prior[i] = 0.0
            constant += 0.5 * math.log(2 * math.pi) - math.log(width)
    factor = np.linalg.cholesky(matrix + np.diag(prior))
    half = np.linalg.solve(factor, right)
    chi_square = square - half @ half
    return constant - np.log(np.diag(factor)).sum() - 0.5 * chi_square, chi_square


def combined(sums, m):
    open_level = ("uniform", 0.0, 1.0, 0.0, 1.0)
    own, own_right, own_square, _ = sums.of(m, 0.0)
    matrix = own + np.diag([0.0] + [1.0] * sums.draws)
    inverse = np.linalg.inv(matrix)
    best = inverse @ own_right
    chi_square = own_square - best @ own_right
    return sums.centre[m] + best[0], math.sqrt(inverse[0, 0]), chi_square, open_level


def phi(z):
    return 0.5 * math.erfc(-z / math.sqrt(2))


def main(path):
    document = read(path)
    sums = Sums(document)
    reference = {}
    for one in document["measurands"]:
        m, said = sums.measurands[one["key"]], one["reference"]
        noise = said.get("scatter", 0.0) ** 2
        reference[m] = (
            ("uniform", 0.0, 1.0, noise, said["upper"] - said["lower"])
            if said["family"] == "uniform"
            else ("normal", said["mean"], said["sd"], noise, 0.0)
        )
    spoken = []
    for hypothesis in document["hypotheses"]:
        roles = {}
        for one in hypothesis["predictions"]:
            tolerance = one["tolerance"]
            each = tolerance.get("sharing") == "each"
            sd = tolerance["sd"]
            roles[sums.measurands[one["measurand"]]] = (
                "normal",
                one["expected"],
                0.0 if each else sd,
                sd * sd if each else 0.0,
                sd,
            )
        spoken.append(roles)
    combinations = [combined(sums, m) for m in range(sums.many)]
    rows, verdicts = [], []
    for hypothesis, roles in zip(document["hypotheses"], spoken):
        ln, _ = evidence(sums, {**reference, **roles})
        _, chi_square = evidence(sums, roles)
        rows.append({"key": hypothesis["key"], "lnEvidence": ln, "chiSquare": chi_square})
        for m, (_, mean, _, _, sd) in roles.items():
            value, own_sd, _, _ = combinations[m]
            own_ln, _ = evidence(sums, {m: roles[m]})
            inside = phi((mean + 2 * sd - value) / own_sd) - phi((mean - 2 * sd - value) / own_sd)
            verdicts.append([hypothesis["key"], m, inside, own_ln])
    best = max(row["lnEvidence"] for row in rows)
    total = sum(math.exp(row["lnEvidence"] - best) for row in rows)
    for row in rows:
        row["posterior"] = math.exp(row["lnEvidence"] - best) / total
    pairs = []
    for a, own in enumerate(spoken):
        for b in range(a + 1, len(spoken)):
            both = own.keys() & spoken[b].keys()
            ln_a, _ = evidence(sums, {m: own[m] for m in both})
            ln_b, _ = evidence(sums, {m: spoken[b][m] for m in both})
            pairs.append([rows[a]["key"], rows[b]["key"], (ln_a - ln_b) / math.log(10)])
    json.dump(
        {
            "hypotheses": rows,
            "pairs": pairs,
            "verdicts": verdicts,
            "measurands": [list(one[:3]) for one in combinations],
        },
        sys.stdout,
    )


main(sys.argv[1])
