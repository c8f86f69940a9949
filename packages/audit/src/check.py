#!/usr/bin/env python3
"""Checks an unpacked audit trail with Python's standard library alone.

    python3 check.py [FOLDER]

A second implementation, written from the published contract and sharing no code with the program
that wrote the archive. It answers with a line for each thing: ok, FAILED, or "not covered" where it
can't tell, with the reason; it never says ok of what it did not compute. Exit code 1 if a line failed.

What it computes anew:
  files      SHA-256 of every file in manifest.json
  ledger     canonical lines, payload digests, order, the Merkle root of each tree head (RFC 6962)
  seals      the digest of what was revealed
  order      filed before observation, before posting, after data
  evidence   ln Z, log10 B, posteriors, common ground; chi-square and degrees of freedom
  combined   value, sd, chi-square, Birge ratio of each quantity
where results are values with a symmetric sd, tolerances are exact, normal or hard intervals about
numbers, references uniform or normal, shared errors absolute. Other forms are named and left alone.
"""
import base64
import calendar
import hashlib
import json
import math
import os
import re
import sys

LN10 = math.log(10)
TOLERANCE = 1e-9
RESULTS = {"ok": 0, "FAILED": 0, "not covered": 0}


class NotCovered(Exception):
    """A form that this program doesn't know how to compute."""


def say(outcome, what, detail=""):
    RESULTS[outcome] += 1
    print(f"{outcome:<12} {what}" + (f": {detail}" if detail else ""))


def judge(what, faults, detail=""):
    if faults:
        more = f"; and {len(faults) - 5} more" if len(faults) > 5 else ""
        say("FAILED", what, "; ".join(faults[:5]) + more)
    else:
        say("ok", what, detail)


def close(a, b):
    if a is None or b is None:
        return a is b
    return abs(a - b) <= TOLERANCE * max(1.0, abs(a), abs(b))


# ---------------------------------------------------------------- files and ledger


def read(folder, path):
    with open(os.path.join(folder, path), "rb") as file:
        return file.read()


def sha256(data):
    return hashlib.sha256(data).hexdigest()


def check_files(folder, manifest):
    faults = []
    for file in manifest["files"]:
        path = file["path"]
        if path.startswith("/") or ".." in path.split("/"):
            faults.append(f"{path} leaves the folder")
            continue
        try:
            data = read(folder, path)
        except OSError:
            faults.append(f"{path} is missing")
            continue
        if len(data) != file["bytes"] or sha256(data) != file["sha256"]:
            faults.append(f"{path} is not the one in the manifest")
    judge("files", faults, f"{len(manifest['files'])} files have the manifest's SHA-256")
    note = read(folder, "manifest.note").decode().split("\n")
    same = note[1] == sha256(read(folder, "manifest.json"))
    judge("manifest.note", [] if same else ["it names another SHA-256"], "names manifest.json")


def leaf_hash(data):
    return hashlib.sha256(b"\x00" + data).digest()


def node_hash(left, right):
    return hashlib.sha256(b"\x01" + left + right).digest()


def add_leaf(edge, leaf):
    """The tree's right edge: (height, root) of its full subtrees, the largest first."""
    edge = edge + [(0, leaf)]
    while len(edge) > 1 and edge[-1][0] == edge[-2][0]:
        (height, left), (_, right) = edge[-2], edge[-1]
        edge = edge[:-2] + [(height + 1, node_hash(left, right))]
    return edge


def root_of(edge):
    root = edge[-1][1]
    for _, left in reversed(edge[:-1]):
        root = node_hash(left, root)
    return root


def is_sorted_json(value):
    """Names in the order of their UTF-16 code units, as RFC 8785 has it."""
    if isinstance(value, dict):
        names = [name.encode("utf-16-be") for name in value]
        return names == sorted(names) and all(is_sorted_json(one) for one in value.values())
    return all(is_sorted_json(one) for one in value) if isinstance(value, list) else True


def check_ledger(folder, manifest):
    lines = read(folder, "ledger.ndjson").split(b"\n")
    payloads = read(folder, "payloads.ndjson").split(b"\n")
    faults = []
    if lines.pop() or payloads.pop() or len(lines) != len(payloads):
        faults.append(f"{len(lines)} entries and {len(payloads)} payloads")
    entries, edge, roots = [], [], {}
    for index, (line, payload) in enumerate(zip(lines, payloads)):
        entry = json.loads(line)
        entries.append(entry)
        if entry["seq"] != index:
            faults.append(f"line {index + 1} has seq {entry['seq']}")
        if index and entry["at"] <= entries[index - 1]["at"]:
            faults.append(f"line {index + 1}: time goes back")
        if entry["payloadSha256"] != sha256(payload):
            faults.append(f"line {index + 1}: another payload")
        if not is_sorted_json(entry) or not is_sorted_json(json.loads(payload)):
            faults.append(f"line {index + 1} is not canonical")
        edge = add_leaf(edge, leaf_hash(line))
        roots[index + 1] = root_of(edge)
    judge("ledger", faults, f"{len(entries)} entries in order, each with its payload")
    check_heads(folder, manifest, roots)
    return entries, [json.loads(payload) for payload in payloads]


def check_heads(folder, manifest, roots):
    faults, count, last = [], 0, 0
    for file in manifest["files"]:
        if not re.fullmatch(r"heads/\d{10}\.note", file["path"]):
            continue
        origin, size, root = read(folder, file["path"]).decode().split("\n")[:3]
        count, last = count + 1, max(last, int(size))
        if origin != manifest["ledger"]:
            faults.append(f"{file['path']} is of {origin}")
        if roots.get(int(size)) != base64.b64decode(root):
            faults.append(f"{file['path']}: the entries have another root")
    if last != len(roots):
        faults.append(f"the last head is of {last} entries")
    if manifest["root"] != base64.b64encode(roots[len(roots)]).decode():
        faults.append("the manifest names another root")
    judge("tree heads", faults, f"{count} heads, each the root of a beginning of the ledger")
    say("not covered", "signatures", "Ed25519 is not in Python's standard library; see README.md")


def canonical(value):
    """RFC 8785, but for numbers whose shortest form Python writes another way than JavaScript."""
    if isinstance(value, dict):
        names = sorted(value, key=lambda name: name.encode("utf-16-be"))
        return "{" + ",".join(canonical(n) + ":" + canonical(value[n]) for n in names) + "}"
    if isinstance(value, list):
        return "[" + ",".join(canonical(one) for one in value) + "]"
    if isinstance(value, float):
        if value == int(value) and abs(value) < 1e21:
            return str(int(value))
        text = repr(value)
        if "e" in text and 1e-7 <= abs(value) < 1e21:
            raise NotCovered(f"the number {text}")
        return re.sub(r"e([+-]?)0*", r"e\1", text)
    return json.dumps(value, ensure_ascii=False)


def check_seals(entries, payloads):
    seals, faults, opened = {}, [], 0
    ledger = payloads[0]["ledger"]
    for entry, payload in zip(entries, payloads):
        if entry["kind"] in ("prediction.sealed", "measurement.sealed"):
            seals[payload["digest"]] = (entry, payload)
        if entry["kind"] not in ("prediction.revealed", "measurement.revealed"):
            continue
        seal, sealed = seals.get(payload["digest"], (None, None))
        if seal is None:
            faults.append(f"entry {entry['seq']} opens what nobody sealed")
            continue
        bound = {
            "ledger": ledger,
            "team": seal["by"].get("team"),
            "hypothesis": sealed.get("hypothesis"),
            "measurand": sealed["measurand"],
            "nonce": payload["nonce"],
            "content": payload["content"],
        }
        try:
            digest = sha256(canonical(bound).encode())
        except NotCovered as reason:
            say("not covered", f"seal opened by entry {entry['seq']}", str(reason))
            continue
        if digest != payload["digest"]:
            faults.append(f"entry {entry['seq']} opens to another content than was sealed")
        opened += 1
    if seals:
        judge("seals", faults, f"{len(seals)} seals, {opened} opened to what was sealed")


# ---------------------------------------------------------------- the model of the data


def instant(text):
    """Seconds since 1970 and nanoseconds of an RFC 3339 time in UTC."""
    match = re.fullmatch(r"(\d+)-(\d+)-(\d+)T(\d+):(\d+):(\d+)(?:\.(\d+))?Z", text)
    parts = [int(part) for part in match.groups()[:6]]
    return calendar.timegm((*parts, 0, 0, 0)), int((match.group(7) or "").ljust(9, "0"))


class Campaign:
    def __init__(self, document):
        self.document = document
        self.observables = {one["key"]: one for one in document["observables"]}
        self.measurands = {one["key"]: one for one in document["measurands"]}
        self.errors = {one["key"]: one for one in document["sharedErrors"]}
        self.derived = {one["key"] for one in document["derived"]}
        self.replaced = {
            measurand
            for one in document["derived"]
            if one["scored"]
            for measurand in one["from"].values()
        }
        correlated = {id_ for one in document["correlations"] for id_ in (one["a"], one["b"])}
        self.correlated = correlated
        self.counted = [
            one
            for one in document["measurements"]
            if one["setAside"] is None and self.measurands[one["measurand"]]["closed"] is None
        ]

    def scale(self, measurand):
        return self.observables[self.measurands[measurand]["observable"]]["scale"]

    def order(self, hypothesis, prediction):
        """Section 8: by the prediction's time against its quantity's first dates."""
        key = prediction["measurand"]
        if key in self.derived:
            raise NotCovered("a derived quantity")
        registered = prediction["registeredAt"] or hypothesis["registeredAt"]
        if registered is None:
            return "undated"
        mine = [one for one in self.document["measurements"] if one["measurand"] == key]
        part = self.measurands[key]
        observed = dates(part["firstObservedAt"], *(one["observedAt"] for one in mine))
        posted = dates(
            part["firstPostedAt"], *(one["postedAt"] or one["observedAt"] for one in mine)
        )
        known = dates(*(one["knownSince"] for one in mine))
        at = instant(registered)
        closes = self.document["campaign"]["registrationCloses"]
        if any(at >= date for date in known + posted):
            return "after"
        if closes is not None and at > instant(closes):
            return "after"
        if mine and not (observed + posted + known):
            return "undated"
        return "before-posting" if any(at >= date for date in observed) else "before-observation"

    def row(self, measurement):
        """A measurement in scoring space: value, variance, loadings of shared errors."""
        key = measurement["measurand"]
        part, scale = self.measurands[key], self.scale(key)
        if scale not in ("linear", "log10", "magnitude"):
            raise NotCovered(f"scale {scale} of {key}")
        if part["shape"] != "constant":
            raise NotCovered(f"curve {key}")
        if key in self.replaced:
            raise NotCovered(f"{key}, whose derived quantity is scored in its place")
        plain = measurement["limit"] is None and measurement["noise"] is None
        if not plain or measurement["value"] is None or measurement["plus"] is not None:
            raise NotCovered(f"the form of measurement {measurement['id']}")
        unit = self.observables[part["observable"]]["unit"]
        factor = factor_between(measurement["unit"] or unit, unit)
        if factor is None:
            raise NotCovered(f"the unit of measurement {measurement['id']}")
        if measurement["id"] in self.correlated:
            raise NotCovered(f"the correlation of measurement {measurement['id']}")
        value, sd = measurement["value"] * factor, measurement["sd"]
        if scale == "log10":
            sd = measurement["sdDex"] or sd * factor / (value * LN10)
            value = math.log10(value)
        else:
            sd *= factor
        loads = {}
        for shared in measurement["shared"]:
            error = self.errors[shared["error"]]
            if error["relative"]:
                raise NotCovered(f"relative shared error {error['key']}")
            batch = measurement["batch"] if error["per"] == "batch" else None
            if error["per"] == "batch" and batch is None:
                batch = ("alone", measurement["id"])
            name = ("error", error["key"], batch)
            loads[name] = loads.get(name, 0.0) + shared["coefficient"] * error["sd"]
        return Row(key, value, sd * sd + part["scatter"] ** 2, loads)

    def place(self, key, value):
        return math.log10(value) if self.scale(key) == "log10" else value

    def speak(self, hypothesis):
        """Predictions that count, by quantity."""
        if hypothesis is None:
            return {}
        counted = {}
        for prediction in hypothesis["predictions"]:
            if prediction["measurand"] in self.derived:
                continue
            if self.order(hypothesis, prediction) != "after":
                counted[prediction["measurand"]] = prediction
        return counted

    def rows(self, hypothesis, only=None):
        """All counted measurements as the hypothesis sees them; None: silent on everything."""
        said = self.speak(hypothesis)
        pairs = []
        if hypothesis is not None and hypothesis["toleranceCorrelations"]:
            raise NotCovered("correlated tolerances")
        for index, measurement in enumerate(self.counted):
            key = measurement["measurand"]
            if only is not None and key not in only:
                continue
            row = self.row(measurement)
            if key in said:
                self.predict(row, said[key], index)
            else:
                self.refer(row)
            pairs.append(row)
        return pairs

    def predict(self, row, prediction, index):
        key, tolerance, expected = row.measurand, prediction["tolerance"], prediction["expected"]
        if prediction["given"] is not None:
            raise NotCovered(f"the conditional prediction of {key}")
        if isinstance(expected, str):
            raise NotCovered(f"the expression for {key}")
        row.compared = True
        family = tolerance["family"] if tolerance else "exact"
        sharing = tolerance["sharing"] if tolerance else "common"
        name = (family, key, index if sharing == "each" else None)
        if family in ("exact", "normal"):
            row.residual = row.value - self.place(key, expected)
        if family == "normal":
            if sharing == "smooth":
                raise NotCovered(f"the smooth tolerance of {key}")
            sd = tolerance["sd"]
            if tolerance["relative"]:
                sd = sd / LN10 if self.scale(key) == "log10" else sd * abs(expected)
            row.loads[name] = sd
        elif family in ("interval", "atMost", "atLeast"):
            row.flat = (name, *self.bounds(key, tolerance))
        elif family != "exact":
            raise NotCovered(f"the {family} tolerance of {key}")

    def bounds(self, key, tolerance):
        reference = self.measurands[key]["reference"]
        lower, upper = tolerance.get("lower"), tolerance.get("upper")
        if tolerance["family"] == "atMost":
            lower, upper = reference["lower"], tolerance["bound"]
        if tolerance["family"] == "atLeast":
            lower, upper = tolerance["bound"], reference["upper"]
        return self.place(key, lower), self.place(key, upper)

    def refer(self, row):
        key = row.measurand
        reference = self.measurands[key]["reference"]
        name = ("reference", key)
        row.variance += reference["scatter"] ** 2
        if reference["family"] == "normal":
            row.residual = row.value - self.place(key, reference["mean"])
            row.loads[name] = reference["sd"]
        elif reference["family"] == "uniform":
            low, high = self.place(key, reference["lower"]), self.place(key, reference["upper"])
            row.flat = (name, low, high)
        else:
            raise NotCovered(f"the {reference['family']} reference of {key}")


PREFIXES = {"n": -9, "u": -6, "µ": -6, "m": -3, "c": -2, "k": 3, "M": 6, "G": 9, "T": 12}
PREFIXED = "S|V|A|W|J|Pa|Hz|K|m|g|s|N|eV|Jy|Bq|rad|pc"


def factor_between(unit, base):
    """The size of one unit in the other, where only their first prefixes differ; else None."""
    if unit == base:
        return 1.0
    form = re.compile(f"([numµckMGT]?)({PREFIXED})((?:[^A-Za-z^0-9].*)?)")
    # A unit is read without a prefix where it can be: "m" is a metre, "Pa" a pascal.
    parts = []
    for text in (unit, base):
        plain = re.fullmatch(f"()({PREFIXED})((?:[^A-Za-z^0-9].*)?)", text or "")
        match = plain or form.fullmatch(text or "")
        if match is None:
            return None
        parts.append(match.groups())
    (prefix, symbol, rest), (prefix_of_base, *same) = parts
    if [symbol, rest] != same:
        return None
    return 10.0 ** (PREFIXES.get(prefix, 0) - PREFIXES.get(prefix_of_base, 0))


def dates(*texts):
    return [instant(text) for text in texts if text is not None]


class Row:
    def __init__(self, measurand, value, variance, loads):
        self.measurand, self.value, self.variance, self.loads = measurand, value, variance, loads
        self.residual, self.flat, self.compared = value, None, False


def components(rows):
    """Rows that share an unknown, directly or through others, belong together."""
    parent = {}

    def find(name):
        while parent.setdefault(name, name) != name:
            name = parent[name]
        return name

    for index, row in enumerate(rows):
        names = list(row.loads) + ([row.flat[0]] if row.flat else [])
        for name in names:
            parent[find(name)] = find(("row", index))
    groups = {}
    for index, row in enumerate(rows):
        groups.setdefault(find(("row", index)), []).append(row)
    return list(groups.values())


class Gauss:
    """N(0, D + W W') over the rows of a component, by Woodbury's identity."""

    def __init__(self, rows):
        self.rows = rows
        self.weights = [1.0 / row.variance for row in rows]
        self.names = sorted({name for row in rows for name in row.loads}, key=repr)
        if len(self.names) > 200:
            raise NotCovered(f"{len(self.names)} unknowns in one block")
        place = {name: index for index, name in enumerate(self.names)}
        self.loads = [[(place[n], load) for n, load in row.loads.items()] for row in rows]
        size = len(self.names)
        matrix = [[float(i == j) for j in range(size)] for i in range(size)]
        for weight, loads in zip(self.weights, self.loads):
            for i, a in loads:
                for j, b in loads:
                    matrix[i][j] += weight * a * b
        self.factor = cholesky(matrix)
        self.log_det = sum(math.log(row.variance) for row in rows) + 2 * sum(
            math.log(self.factor[i][i]) for i in range(size)
        )

    def solve(self, vector):
        """S^-1 v, refined once: the plain formula loses digits where loadings are large."""
        first = self.solve_once(vector)
        rest = [v - s for v, s in zip(vector, self.times(first))]
        return [a + b for a, b in zip(first, self.solve_once(rest))]

    def solve_once(self, vector):
        scaled = [weight * v for weight, v in zip(self.weights, vector)]
        right = [0.0] * len(self.names)
        for s, loads in zip(scaled, self.loads):
            for i, load in loads:
                right[i] += load * s
        inner = back(self.factor, right)
        return [
            s - w * sum(load * inner[i] for i, load in loads)
            for s, w, loads in zip(scaled, self.weights, self.loads)
        ]

    def times(self, vector):
        inner = [0.0] * len(self.names)
        for v, loads in zip(vector, self.loads):
            for i, load in loads:
                inner[i] += load * v
        return [
            row.variance * v + sum(load * inner[i] for i, load in loads)
            for row, v, loads in zip(self.rows, vector, self.loads)
        ]

    def quadratic(self, vector):
        return math.fsum(v * s for v, s in zip(vector, self.solve(vector)))


def cholesky(matrix):
    size = len(matrix)
    factor = [[0.0] * size for _ in range(size)]
    for i in range(size):
        for j in range(i + 1):
            rest = matrix[i][j] - math.fsum(factor[i][k] * factor[j][k] for k in range(j))
            factor[i][j] = math.sqrt(rest) if i == j else rest / factor[j][j]
    return factor


def back(factor, right):
    size = len(factor)
    first = [0.0] * size
    for i in range(size):
        first[i] = (right[i] - sum(factor[i][k] * first[k] for k in range(i))) / factor[i][i]
    for i in reversed(range(size)):
        rest = first[i] - sum(factor[k][i] * first[k] for k in range(i + 1, size))
        first[i] = rest / factor[i][i]
    return first


def log_tail(x):
    """ln of the standard normal's probability above x."""
    if x < 25:
        return math.log(0.5 * math.erfc(x / math.sqrt(2)))
    fraction = 0.0
    for k in range(60, 0, -1):
        fraction = k / (x + fraction)
    return -0.5 * x * x - 0.5 * math.log(2 * math.pi) - math.log(x + fraction)


def log_between(lower, upper):
    """ln of the standard normal's probability between two bounds, right in the tails."""
    if upper <= 0:
        lower, upper = -upper, -lower
    if lower <= 0:
        return math.log1p(-0.5 * math.erfc(-lower / math.sqrt(2)) - 0.5 * math.erfc(upper / math.sqrt(2)))
    first, second = log_tail(lower), log_tail(upper)
    return first + math.log1p(-math.exp(second - first))


def flat_of(rows):
    flats = {row.flat for row in rows if row.flat}
    if len(flats) > 1:
        raise NotCovered("several bounded unknowns coupled by shared errors")
    return next(iter(flats), None)


def level(gauss, rows):
    """Best level of the one flat unknown, its precision, and what is left of the residuals."""
    touch = [1.0 if row.flat else 0.0 for row in rows]
    start = next(row.value for row in rows if row.flat)
    residuals = [row.value - start if row.flat else row.residual for row in rows]
    solved = gauss.solve(touch)
    precision = math.fsum(t * s for t, s in zip(touch, solved))
    shift = math.fsum(r * s for r, s in zip(residuals, solved)) / precision
    rest = [r - shift * t for r, t in zip(residuals, touch)]
    return start + shift, precision, rest


def log_evidence(rows):
    total = 0.0
    for group in components(rows):
        gauss, flat = Gauss(group), flat_of(group)
        constant = -0.5 * len(group) * math.log(2 * math.pi) - 0.5 * gauss.log_det
        if flat is None:
            total += constant - 0.5 * gauss.quadratic([row.residual for row in group])
            continue
        _, low, high = flat
        best, precision, rest = level(gauss, group)
        root = math.sqrt(precision)
        total += constant - 0.5 * gauss.quadratic(rest) + 0.5 * math.log(2 * math.pi / precision)
        total += log_between((low - best) * root, (high - best) * root) - math.log(high - low)
    return total


def chi_square(rows):
    total, freedom = 0.0, len(rows)
    for group in components(rows):
        gauss, flat = Gauss(group), flat_of(group)
        if flat is None:
            total += gauss.quadratic([row.residual for row in group])
            continue
        _, low, high = flat
        best, _, _ = level(gauss, group)
        inside = min(max(best, low), high)
        margin = 1e-6 * (high - low)
        if low + margin < best < high - margin:
            freedom -= 1
        total += gauss.quadratic([row.value - inside if row.flat else row.residual for row in group])
    return total, freedom


# ---------------------------------------------------------------- the standings


def attempt(what, compute):
    try:
        return compute()
    except NotCovered as reason:
        say("not covered", what, str(reason))
        return None


def compare(what, pairs):
    faults = [
        f"{name} is {found} in standings.json, computed {computed}"
        for name, found, computed in pairs
        if not close(found, computed)
    ]
    numbers = ", ".join(f"{name} {computed}" for name, _, computed in pairs)
    judge(what, faults, numbers)


def check_orders(campaign, standings):
    hypotheses = {one["key"]: one for one in campaign.document["hypotheses"]}
    faults, count, left = [], 0, 0
    for verdict in standings["verdicts"]:
        hypothesis = hypotheses[verdict["hypothesis"]]
        said = [p for p in hypothesis["predictions"] if p["measurand"] == verdict["measurand"]]
        if not said or verdict["measurand"] in campaign.derived:
            left += 1
            continue
        count += 1
        order = campaign.order(hypothesis, said[0])
        if order != verdict["order"]:
            faults.append(f"{verdict['hypothesis']} on {verdict['measurand']}: computed {order}")
    judge("before and after data", faults, f"{count} predictions")
    if left:
        say("not covered", "before and after data", f"{left} rows withheld or on derived quantities")


def check_standings(campaign, standings):
    hypotheses = {one["key"]: one for one in campaign.document["hypotheses"]}
    evidence = {}
    evidence[None] = attempt("no model", lambda: log_evidence(campaign.rows(None)))
    if evidence[None] is not None:
        compare("no model", [("ln Z", standings["noModel"]["lnEvidence"], evidence[None])])
    for row in standings["hypotheses"]:
        key = row["key"]
        hypothesis = hypotheses.get(key)
        if key == "noneOfThese":
            evidence[key] = evidence[None]
        else:
            evidence[key] = attempt(key, lambda: evidence_of(campaign, hypothesis))
        if evidence[key] is not None:
            rows = campaign.rows(hypothesis)
            compared = [one for one in rows if one.compared]
            pairs = [("ln Z", row["lnEvidence"], evidence[key])]
            pairs += [("compared", row["compared"], len(compared))]
            pairs += [("silent", row["silent"], len(rows) - len(compared))]
            if compared:
                chi2, freedom = chi_square(compared)
                pairs += [("chi-square", row["chiSquare"], chi2)]
                pairs += [("degrees of freedom", row["degreesOfFreedom"], freedom)]
            compare(key, pairs)
    check_relative(campaign, standings, evidence)
    check_pairs(campaign, standings, evidence, hypotheses)


def evidence_of(campaign, hypothesis):
    if hypothesis["ensemble"] is not None:
        raise NotCovered("an ensemble")
    for measurand in hypothesis["withheld"]:
        if any(p["measurand"] == measurand for p in hypothesis["predictions"]):
            raise NotCovered(f"withheld and predicted: {measurand}")
    return log_evidence(campaign.rows(hypothesis))


def check_relative(campaign, standings, evidence):
    rows = standings["hypotheses"]
    missing = [row["key"] for row in rows if evidence[row["key"]] is None]
    if missing:
        say("not covered", "posteriors and ranks", "no evidence of " + ", ".join(missing))
        return
    groups = {}
    for one in campaign.document["hypotheses"]:
        if one["group"] is not None:
            groups[one["group"]] = groups.get(one["group"], 0) + 1
    weights = {
        one["key"]: one["weight"] / groups.get(one["group"], 1)
        for one in campaign.document["hypotheses"]
    }
    weights["noneOfThese"] = campaign.document["campaign"]["noneOfThese"]["weight"]
    best = max(evidence[row["key"]] for row in rows)
    mass = {row["key"]: weights[row["key"]] * math.exp(evidence[row["key"]] - best) for row in rows}
    total = math.fsum(mass.values())
    pairs = []
    for row in rows:
        key = row["key"]
        factor = (evidence[key] - best) / LN10
        pairs.append((f"log10 B of {key}", row["log10BayesFactor"], factor))
        pairs.append((f"posterior of {key}", row["posterior"], mass[key] / total))
    compare("Bayes factors and posteriors", pairs)
    ranked = sorted(rows, key=lambda row: row["rank"])
    faults = [
        f"{b['key']} ranks below {a['key']}"
        for a, b in zip(ranked, ranked[1:])
        if evidence[b["key"]] > evidence[a["key"]] + 1e-9
    ]
    judge("ranks", faults, ", ".join(row["key"] for row in ranked))


def check_pairs(campaign, standings, evidence, hypotheses):
    compared = []
    for pair in standings["pairs"]:
        a, b = pair["a"], pair["b"]
        name = f"{a} and {b}"
        if evidence[a] is None or evidence[b] is None:
            say("not covered", name, "no evidence of one of them")
            continue
        factor = (evidence[a] - evidence[b]) / LN10
        compared.append((f"log10 B, {name}", pair["log10BayesFactor"], factor))
        if a == "noneOfThese" or b == "noneOfThese":
            continue
        common = set(campaign.speak(hypotheses[a])) & set(campaign.speak(hypotheses[b]))
        counted = [one for one in campaign.counted if one["measurand"] in common]
        found = pair["commonGround"]
        compared.append((f"common measurements, {name}", found["measurements"], len(counted)))
        ground = None
        if counted:
            ground = (
                log_evidence(campaign.rows(hypotheses[a], common))
                - log_evidence(campaign.rows(hypotheses[b], common))
            ) / LN10
        compared.append((f"common ground, {name}", found["log10BayesFactor"], ground))
    if compared:
        compare("pairs", compared)


def combine(campaign, key):
    counted = [one for one in campaign.counted if one["measurand"] == key]
    if not counted:
        return None
    rows = [campaign.row(one) for one in counted]
    for row in rows:
        row.flat = (("level", key), -math.inf, math.inf)
    gauss = Gauss(rows)
    best, precision, rest = level(gauss, rows)
    log = campaign.scale(key) == "log10"
    chi2, freedom = gauss.quadratic(rest), len(rows) - 1
    return {
        "value": 10**best if log else best,
        "sd": 1 / math.sqrt(precision),
        "chiSquare": chi2,
        "degreesOfFreedom": freedom,
        "birgeRatio": math.sqrt(chi2 / freedom) if freedom > 0 else None,
    }


def check_combined(campaign, standings):
    for row in standings["measurands"]:
        key = row["key"]
        if key in campaign.derived:
            say("not covered", f"combined {key}", "a derived quantity")
            continue
        if campaign.measurands[key]["closed"] is not None:
            say("not covered", f"combined {key}", "a closed quantity")
            continue
        found = row["combined"]
        computed = attempt(f"combined {key}", lambda: (combine(campaign, key),))
        if computed is None:
            continue
        if found is None or computed[0] is None:
            same = found is computed[0]
            judge(f"combined {key}", [] if same else [f"found {found}, computed {computed[0]}"], "none")
            continue
        compare(f"combined {key}", [(n, found[n], v) for n, v in computed[0].items()])


NOT_COMPUTED = (
    "verdicts, tensions and conformance; p-values; parameters; thresholds; warnings; "
    "sensitivity.json; the fold of the entries to campaign.json; tables and figures"
)


def main(folder):
    manifest = json.loads(read(folder, "manifest.json"))
    check_files(folder, manifest)
    entries, payloads = check_ledger(folder, manifest)
    check_seals(entries, payloads)
    campaign = Campaign(json.loads(read(folder, "campaign.json")))
    standings = json.loads(read(folder, "standings.json"))
    check_orders(campaign, standings)
    check_standings(campaign, standings)
    check_combined(campaign, standings)
    say("not covered", "the rest", NOT_COMPUTED)
    counts = ", ".join(f"{count} {outcome}" for outcome, count in RESULTS.items() if count)
    print(f"{counts}; engine {standings['engine']} wrote the standings")
    return 1 if RESULTS["FAILED"] else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1] if len(sys.argv) > 1 else "."))
