"""Reads the three tables of a folder with astropy and prints them as JSON: names, values, masks."""

import json
import sys
import warnings
from pathlib import Path

import numpy as np
from astropy.table import Table

warnings.simplefilter("error")


def columns(table):
    found = {}
    for name in table.colnames:
        column = table[name]
        mask = getattr(column, "mask", None)
        masked = np.zeros(len(table), bool) if mask is None else np.asarray(mask)
        values = []
        for value, hidden in zip(column, np.broadcast_to(masked, len(table))):
            if hidden or value is np.ma.masked:
                values.append(None)
            elif isinstance(value, (np.floating, float)) and np.isnan(value):
                values.append(None)
            else:
                values.append(value.item() if hasattr(value, "item") else str(value))
        found[name] = values
    return found


folder = Path(sys.argv[1])
print(
    json.dumps(
        {
            "ecsv": columns(Table.read(folder / "table.ecsv", format="ascii.ecsv")),
            "vot": columns(Table.read(folder / "table.vot", format="votable")),
            "txt": columns(Table.read(folder / "table.txt", format="ascii.mrt")),
        }
    )
)
