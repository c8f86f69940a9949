"""Writes files/: tables in ECSV and VOTable as astropy writes them, and beside each what it reads back.

    apt-get install -y python3-astropy && /usr/bin/python3 make-tables.py

In a `.json` a masked cell is null; numbers that JSON or a double can't hold are strings (`nan`, `inf`,
`-inf`, integers past 2^53). A time has its value as written, its scale and its format. Every quantity
and name is invented.
"""

import json
import pathlib
import sys
import warnings

import astropy
import numpy as np
from astropy import units as u
from astropy.coordinates import SkyCoord
from astropy.io.votable import parse as parse_votable
from astropy.io.votable import tree
from astropy.table import Column, MaskedColumn, QTable, Table
from astropy.time import Time, TimeDelta
from astropy.utils import iers
from astropy.utils.masked import Masked

iers.conf.auto_download = False
iers.conf.iers_degraded_accuracy = "ignore"
warnings.simplefilter("ignore")

FOLDER = pathlib.Path(__file__).with_name("files")
NULLS = {"sigmas": -1, "counts": -99}
INT64 = np.iinfo(np.int64)


def nightly(text_times=False):
    """A table as a reduction ends with: values, asymmetric errors, limits, flags, what is missing."""
    rows = 6
    table = Table(meta={"origin": "invented", "night": 4, "pipeline": {"steps": ["bias", "flat"]}})
    table["id"] = [f"mast-4-{i}" for i in range(rows)]
    iso = [f"2031-03-0{i + 1}T0{i}:15:30.250" for i in range(rows)]
    table["obs_time"] = Column(iso, description="UTC") if text_times else Time(iso, scale="utc")
    table["flux"] = MaskedColumn([12.5, -0.25, 3.0e-7, 1 / 3, 20.0, 0.0], unit="Jy",
                                 mask=[0, 0, 0, 0, 0, 1], description="flux density, 3 mm")
    table["e_flux"] = MaskedColumn([0.5, 0.125, 1e-8, 0.0, 0.0, 0.0], unit="Jy",
                                   mask=[0, 0, 0, 1, 1, 1])
    table["err_up"] = MaskedColumn([0, 0, 0, 0.1, 0, 0], unit="Jy", mask=[1, 1, 1, 0, 1, 1])
    table["err_lo"] = MaskedColumn([0, 0, 0, 0.05, 0, 0], unit="Jy", mask=[1, 1, 1, 0, 1, 1])
    table["l_flux"] = ["", "", "", "", "<", ">"]
    table["sigmas"] = MaskedColumn([0, 0, 0, 0, 3, 5], dtype=np.int16, mask=[1, 1, 1, 1, 0, 0])
    table["counts"] = MaskedColumn([1, 2, 0, INT64.max, INT64.min, 9007199254740993],
                                   dtype=np.int64, mask=[0, 0, 1, 0, 0, 0])
    table["seen"] = MaskedColumn([True, False, True, False, True, False],
                                 mask=[0, 0, 0, 1, 0, 0])
    table["note"] = MaskedColumn(
        ['plain', 'with "quotes", commas; and\ttabs', "two\nlines", " \u03b2 \u2212 \U0001f319 \u00e9 ",
         "<b>&amp;</b> ]]>", "gone"], mask=[0, 0, 0, 0, 0, 1])
    return table


def numbers():
    """Every type of number, at its ends."""
    table = Table()
    table["f8"] = [0.1, -0.0, 5e-324, 1.7976931348623157e308, np.nan, np.inf, -np.inf]
    table["f4"] = np.array([0.1, -0.0, 1e-45, 3.4028235e38, np.nan, np.inf, -np.inf], np.float32)
    table["i8"] = np.array([INT64.min, INT64.max, -1, 2**53, 2**53 + 1, -(2**53) - 1, 0], np.int64)
    table["i4"] = np.array([-(2**31), 2**31 - 1, -1, 0, 1, 2, 3], np.int32)
    table["i2"] = np.array([-(2**15), 2**15 - 1, -1, 0, 1, 2, 3], np.int16)
    table["u1"] = np.array([0, 255, 128, 127, 1, 2, 3], np.uint8)
    table["b"] = [True, False, True, False, True, False, True]
    return table


def more_numbers():
    """Types that ECSV alone has."""
    table = Table()
    table["u8"] = np.array([0, 2**64 - 1, 2**63], np.uint64)
    table["u4"] = np.array([0, 2**32 - 1, 7], np.uint32)
    table["u2"] = np.array([0, 2**16 - 1, 7], np.uint16)
    table["i1"] = np.array([-128, 127, 7], np.int8)
    table["f2"] = np.array([0.1, 65504, 6e-8], np.float16)
    table["f16"] = np.array(["0.1", "3.14159265358979323846", "1e4000"], np.longdouble)
    return table


def times():
    """One instant a row, in every scale and format that a table may have."""
    utc = Time(["2031-03-01T06:00:00", "2016-12-31T23:59:60.25", "1999-12-31T23:59:59.999999"],
               scale="utc")
    table = QTable()
    for scale in ("utc", "tt", "tdb", "tai"):
        for form in ("isot", "iso", "jd", "mjd", "jyear", "unix" if scale == "utc" else "cxcsec"):
            time = getattr(utc, scale).copy(format=form)
            time.precision = 6
            table[f"{scale}_{form}"] = time
    return table


def masked_times():
    table = QTable()
    time = Time(["2031-03-01T06:00:00", "2031-03-02T06:00:00"], scale="tt")
    time[1] = np.ma.masked
    table["when"] = time
    time = Time([60123.25, 60124.25], format="mjd", scale="tdb")
    time[0] = np.ma.masked
    table["then"] = time
    return table


def quantities():
    table = QTable()
    table["speed"] = [1.5, 2.5] * u.km / u.s
    table["noise"] = Masked([3.0, 4.0] * u.mJy, mask=[False, True])
    table["glow"] = [21.5, 22.5] * u.mag
    table["where"] = SkyCoord([10.5, 20.5] * u.deg, [-5.0, 85.0] * u.deg)
    table["lag"] = TimeDelta([0.5, 1.5], format="jd", scale="tt")
    table["plain"] = Column([1, 2], unit="m")
    return table


def subtypes():
    table = Table()
    table["id"] = ["a", "b"]
    table["triple"] = np.array([[1.0, 2.0, 3.0], [4.0, 5.0, 6.0]])
    table["ragged"] = np.array([np.array([1, 2]), np.array([3])], dtype=object)
    table["thing"] = np.array([{"a": 1}, {"b": [2]}], dtype=object)
    return table


def plain(value):
    if value is np.ma.masked or (isinstance(value, np.ma.core.MaskedConstant)):
        return None
    if isinstance(value, np.ma.MaskedArray):
        return [plain(item) for item in value]
    if isinstance(value, np.ndarray):
        return [plain(item) for item in value]
    if isinstance(value, np.complexfloating):
        return [plain(value.real), plain(value.imag)]
    if isinstance(value, np.bool_):
        return bool(value)
    if isinstance(value, np.integer):
        number = int(value)
        return number if abs(number) <= 2**53 - 1 else str(number)
    if isinstance(value, np.floating):
        if isinstance(value, np.longdouble) and not isinstance(value, np.float64):
            return np.format_float_scientific(value, trim="-")
        number = float(value)
        return number if np.isfinite(number) else str(number)
    if isinstance(value, (bytes, np.bytes_)):
        return value.decode("utf-8")
    return str(value) if isinstance(value, (str, np.str_)) else value


def cells(column):
    if isinstance(column, (Time, TimeDelta)):
        mask = column.mask if np.ndim(column.mask) else [False] * len(column)
        values = column.value
        return [None if hidden else plain(np.asarray(values)[i]) for i, hidden in enumerate(mask)]
    if isinstance(column, u.Quantity):
        mask = getattr(column, "mask", [False] * len(column))
        data = column.unmasked if hasattr(column, "unmasked") else column
        return [None if hidden else plain(data.value[i]) for i, hidden in enumerate(mask)]
    return [plain(item) for item in column]


def described(column):
    out = {
        "name": column.info.name,
        "unit": None if getattr(column, "unit", None) is None else str(column.unit),
        "description": column.info.description,
    }
    ucd = (column.info.meta or {}).get("ucd")
    if ucd is not None:
        out["ucd"] = ucd
    if isinstance(column, Time):
        out["time"] = {"scale": column.scale, "format": column.format}
    out["cells"] = cells(column)
    return out


def keep(name, table):
    columns = [described(table[key]) for key in table.colnames if not isinstance(table[key], SkyCoord)]
    text = json.dumps({"file": name, "rows": len(table), "columns": columns}, indent=2,
                      ensure_ascii=False, allow_nan=False)
    (FOLDER / f"{name}.json").write_text(text + "\n", encoding="utf-8")


def ecsv(name, table, **options):
    path = FOLDER / f"{name}.ecsv"
    table.write(path, format="ascii.ecsv", overwrite=True, **options)
    keep(path.name, type(table).read(path, format="ascii.ecsv"))


def votable(name, table, serialization, version="1.4", change=None, keep_as=None):
    path = FOLDER / f"{name}.vot"
    file = tree.VOTableFile.from_table(table) if isinstance(table, Table) else table
    file.version = version
    if change is not None:
        change(file)
    file.to_xml(str(path), tabledata_format=serialization)
    read = parse_votable(str(path))
    keep(path.name, read.get_table_by_index(keep_as or 0).to_table())


def with_ucds(file):
    table = file.get_first_table()
    ucds = {"flux": "phot.flux.density;em.mm", "e_flux": "stat.error;phot.flux.density;em.mm",
            "obs_time": "time.epoch;obs", "id": "meta.id;meta.main"}
    for field in table.fields:
        field.ucd = ucds.get(field.name)
        if field.name == "seen":
            field.datatype = "boolean"
        if field.name in NULLS:
            field.values.null = NULLS[field.name]
    table.params.append(tree.Param(file, name="facility", datatype="char", arraysize="*",
                                   value="reed mast"))
    table.infos.append(tree.Info(name="QUERY_STATUS", value="OK"))
    file.description = "An invented night."


def with_time_systems(file):
    resource = file.resources[0]
    for ID, origin, scale in (("sys_mjd", 2400000.5, "TDB"), ("sys_jd", 0.0, "TT"),
                              ("sys_own", 2455197.5, "UTC"), ("sys_iso", None, "UTC")):
        system = tree.TimeSys(ID=ID, timeorigin=origin, timescale=scale,
                              refposition="BARYCENTER" if scale == "TDB" else "TOPOCENTER",
                              config={"version_1_4_or_later": True})
        resource.time_systems.append(system)
    for field in file.get_first_table().fields:
        field.ref = {"mjd": "sys_mjd", "jd": "sys_jd", "own": "sys_own", "iso": "sys_iso"}.get(field.name)
        field.ucd = "time.epoch" if field.ref else None


def time_systems():
    table = Table()
    table["mjd"] = Column([60123.25, 60124.125], unit="d")
    table["jd"] = Column([2460123.75, 2460124.625], unit="d")
    table["own"] = Column([1.5, 2.25], unit="d")
    table["iso"] = ["2031-03-01T06:00:00", "2031-03-02T06:00:00.5"]
    table["value"] = [1.5, 2.5]
    return table


def arrays():
    table = Table()
    table["id"] = ["a", "b"]
    table["triple"] = np.array([[1.0, 2.0, 3.0], [4.0, 5.0, 6.0]])
    table["grid"] = np.arange(8, dtype=np.int32).reshape(2, 2, 2)
    table["z"] = np.array([1 + 2j, 3 - 4j])
    ragged = np.empty(2, dtype=object)
    ragged[:] = [np.ma.array([1.0, 2.0], mask=[0, 0]), np.ma.array([3.0], mask=[0])]
    table["ragged"] = ragged
    table["value"] = [1.5, 2.5]
    return table


def several():
    """Three tables: the first has no rows, the last isn't the one with measurements."""
    file = tree.VOTableFile()
    for name, table in (("empty", nightly(True)[:0]), ("night", nightly(True)), ("log", arrays())):
        resource = tree.Resource(name=name)
        one = tree.Table.from_table(file, table)
        one.name = name
        resource.tables.append(one)
        file.resources.append(resource)
    return file


def failed():
    file = tree.VOTableFile()
    resource = tree.Resource(type="results")
    info = tree.Info(name="QUERY_STATUS", value="ERROR")
    info.content = "the service has no such column: glwo"
    resource.infos.append(info)
    file.resources.append(resource)
    return file


def main():
    FOLDER.mkdir(exist_ok=True)
    ecsv("nightly", nightly())
    ecsv("nightly-comma", nightly(), delimiter=",")
    ecsv("nightly-data-mask", nightly(True), serialize_method="data_mask")
    ecsv("numbers", numbers())
    ecsv("more-numbers", more_numbers())
    ecsv("times", times())
    ecsv("times-jd1-jd2", times()["utc_isot", "tt_mjd", "tdb_jd"], serialize_method="jd1_jd2")
    ecsv("masked-times", masked_times())
    ecsv("masked-times-jd1-jd2", masked_times(), serialize_method="jd1_jd2")
    ecsv("quantities", quantities())
    ecsv("subtypes", subtypes())
    ecsv("no-rows", nightly(True)[:0])

    for serialization in ("tabledata", "binary", "binary2"):
        votable(f"nightly-{serialization}", nightly(True), serialization, change=with_ucds)
        votable(f"numbers-{serialization}", numbers(), serialization)
        votable(f"arrays-{serialization}", arrays(), serialization)
    for version in ("1.1", "1.2", "1.3"):
        votable(f"nightly-{version}", nightly(True), "tabledata", version,
                change=with_ucds)
    votable("time-systems", time_systems(), "binary2", change=with_time_systems)
    votable("several", several(), "tabledata", keep_as=1)
    failed().to_xml(str(FOLDER / "failed.vot"))
    versions = {"python": sys.version.split()[0], "astropy": astropy.__version__, "numpy": np.__version__}
    (FOLDER / "versions.json").write_text(json.dumps(versions, indent=2) + "\n")


main()
