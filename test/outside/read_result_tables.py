"""Reads result tables with Astropy: [format, text] pairs on standard input; columns, units, rows and meta as JSON out."""
import json
import sys

from astropy.table import Table

out = []
for kind, text in json.load(sys.stdin):
    table = Table.read(text, format=kind) if kind == "ascii.ecsv" else Table.read(text, format=kind, comment="#")
    out.append(
        {
            "columns": table.colnames,
            "units": [str(table[name].unit or "") for name in table.colnames],
            "descriptions": [table[name].description or "" for name in table.colnames],
            "rows": [[float(v) for v in row] for row in table],
            "meta": {} if kind == "ascii.csv" else dict(table.meta),
        }
    )
json.dump(out, sys.stdout)
