# Writes iapws-reference.json: saturated water by Debian's python3-iapws (IAPWS-95 and the releases on viscosity,
# conductivity and surface tension). Run once; the test compares with what it wrote.
import json
import sys

import iapws
from iapws import IAPWS95

rows = []
for T in [280, 300, 313.15, 323.15, 350, 373.15, 400, 450, 500, 550, 600, 620]:
    l = IAPWS95(T=T, x=0)
    v = IAPWS95(T=T, x=1)
    rows.append({
        "T": T, "p": l.P * 1e6, "rhoL": l.rho, "rhoV": v.rho, "hfg": (v.h - l.h) * 1e3,
        "cpL": l.cp * 1e3, "cpV": v.cp * 1e3, "muL": l.mu, "muV": v.mu, "kL": l.k, "kV": v.k, "sigma": l.sigma,
    })
json.dump({"source": f"python3-iapws {iapws.__version__}, IAPWS-95", "rows": rows}, sys.stdout, indent=1)
