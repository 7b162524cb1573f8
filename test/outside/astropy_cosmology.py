"""Distances, ages and expansion rates of flat cosmologies by Astropy; JSON in, JSON out."""
import json
import sys

import astropy.units as u
import numpy as np
from astropy.cosmology import FlatLambdaCDM

answers = []
for p in json.load(sys.stdin):
    h = p["h0"] / 100
    massive = p["sumMnu"] > 0
    c = FlatLambdaCDM(
        H0=p["h0"],
        Om0=(p["omegaB"] + p["omegaC"]) / h**2,
        Ob0=p["omegaB"] / h**2,
        Tcmb0=p["tCmb"],
        Neff=p["nEff"],
        m_nu=u.Quantity([0, 0, p["sumMnu"]] if massive else 0, u.eV),
    )
    z = np.array(p["z"])
    answers.append(
        {
            "H": c.H(z).to_value(u.km / u.s / u.Mpc).tolist(),
            "distance": c.comoving_transverse_distance(z).to_value(u.Mpc).tolist(),
            "age": c.age(z).to_value(u.Gyr).tolist(),
        }
    )
json.dump(answers, sys.stdout)
