"""Reads rate files with Astropy: paths as JSON list on standard input, columns, units and meta of each as JSON out."""
import json
import sys

from astropy.table import Table

out = []
for path in json.load(sys.stdin):
    table = Table.read(path, format="ascii.ecsv")
    out.append(
        {
            "columns": {name: [float(v) for v in table[name]] for name in table.colnames},
            "units": {name: str(table[name].unit or "") for name in table.colnames},
            "meta": {key: str(value) for key, value in table.meta.items()},
        }
    )
json.dump(out, sys.stdout)
