"""Reads tables with astropy and writes what it finds in them as JSON: read_tables.py FILE..."""

import json
import pathlib
import sys
import warnings

import numpy as np
from astropy.io.votable import parse
from astropy.table import Table
from astropy.time import Time
from astropy.utils import iers

iers.conf.auto_download = False
iers.conf.iers_degraded_accuracy = "ignore"
# Years to come, which no leap second is known of, and units that the tables invent.
warnings.simplefilter("ignore")


def read(path):
    if path.endswith(".ecsv"):
        return Table.read(path, format="ascii.ecsv")
    # Every warning is an error but where a table invents its units.
    verify = "ignore" if pathlib.Path(path).name.startswith("hard") else "exception"
    return parse(path, verify=verify).get_first_table().to_table(use_names_over_ids=True)


def plain(value):
    """Integers as their digits, other numbers as the nearest doubles, texts and truths as they are."""
    if value is np.ma.masked:
        return None
    if isinstance(value, np.bool_):
        return bool(value)
    if isinstance(value, np.integer):
        return str(int(value))
    return float(value) if isinstance(value, np.floating) else str(value)


def described(column):
    unit = getattr(column, "unit", None)
    out = {
        "name": column.info.name,
        "unit": None if unit is None else str(unit),
        "ucd": (column.info.meta or {}).get("ucd"),
        "description": column.info.description,
    }
    if isinstance(column, Time):
        hidden = np.broadcast_to(column.mask, column.shape)
        out["scale"] = column.scale
        out["cells"] = [None if hide else str(np.asarray(column.isot)[i]) for i, hide in enumerate(hidden)]
    else:
        out["cells"] = [plain(cell) for cell in column]
    return out


json.dump([[described(table[name]) for name in table.colnames]
           for table in map(read, sys.argv[1:])], sys.stdout, allow_nan=False)
