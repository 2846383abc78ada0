"""Transcribe published equation-of-state coefficients into src/refrigerant/coefficients/*.json.

The coefficients are the published ones of the papers named in each file. They are taken from the fluid
files of the PyPI package CoolProp 8.0.0, which carries the same numbers; nothing is refitted. The
`record` part is the JSON form that the multiparameter model of the crate feos 0.10 reads; what stands
beside it (gas constant, critical point, range, publication) is ours.

Run:  python tests/reference/refrigerant_coefficients.py      (from the repository root)
"""

import json
from pathlib import Path

import CoolProp.CoolProp as CP

assert CP.get_global_param_string("version").startswith("8.0"), "made with CoolProp 8.0.0"

OUT = Path("src/refrigerant/coefficients")

# fluid -> (file, authors, year, title, where, doi); titles and DOIs as in the papers' own headers
PAPERS = {
    "R290": (
        "lemmon_2009_r290",
        "E. W. Lemmon, M. O. McLinden, W. Wagner",
        2009,
        "Thermodynamic Properties of Propane. III. A Reference Equation of State for Temperatures from "
        "the Melting Line to 650 K and Pressures up to 1000 MPa",
        "J. Chem. Eng. Data 54, 3141-3180",
        "10.1021/je900217v",
    ),
    "R32": (
        "tillner_roth_1997_r32",
        "R. Tillner-Roth, A. Yokozeki",
        1997,
        "An International Standard Equation of State for Difluoromethane (R-32) for Temperatures from "
        "the Triple Point at 136.34 K to 435 K and Pressures up to 70 MPa",
        "J. Phys. Chem. Ref. Data 26, 1273-1328",
        "10.1063/1.556002",
    ),
    "R410A": (
        "lemmon_2003_r410a",
        "E. W. Lemmon",
        2003,
        "Pseudo-Pure Fluid Equations of State for the Refrigerant Blends R-410A, R-404A, R-507A, and R-407C",
        "Int. J. Thermophys. 24, 991-1006",
        "10.1023/A:1025048800563",
    ),
    "R134a": (
        "tillner_roth_1994_r134a",
        "R. Tillner-Roth, H. D. Baehr",
        1994,
        "An International Standard Formulation for the Thermodynamic Properties of "
        "1,1,1,2-Tetrafluoroethane (HFC-134a) for Temperatures from 170 K to 455 K and Pressures up to 70 MPa",
        "J. Phys. Chem. Ref. Data 23, 657-729",
        "10.1063/1.555958",
    ),
    "R1234yf": (
        "lemmon_2022_r1234yf",
        "E. W. Lemmon, R. Akasaka",
        2022,
        "An International Standard Formulation for 2,3,3,3-Tetrafluoroprop-1-ene (R1234yf) Covering "
        "Temperatures from the Triple Point Temperature to 410 K and Pressures Up to 100 MPa",
        "Int. J. Thermophys. 43, 119",
        "10.1007/s10765-022-03015-y",
    ),
    "R600a": (
        "buecker_2006_r600a",
        "D. Bücker, W. Wagner",
        2006,
        "Reference Equations of State for the Thermodynamic Properties of Fluid Phase n-Butane and Isobutane",
        "J. Phys. Chem. Ref. Data 35, 929-1019",
        "10.1063/1.1901687",
    ),
}

# Offsets that only fix a library's own zero of enthalpy and entropy are no part of a publication.
NOT_PUBLISHED = {"IdealGasHelmholtzEnthalpyEntropyOffset"}




def term(source):
    ordered = {"type": source["type"]}
    for key in sorted(k for k in source if k != "type"):
        ordered[key] = source[key]
    return ordered


def layout(document):
    """JSON with one line for each array, so that a term can be held beside the paper's table."""
    text = json.dumps(document, indent=2, ensure_ascii=False)
    out, depth, buffer = [], 0, ""
    for line in text.splitlines():
        stripped = line.strip()
        if depth == 0 and stripped.endswith("[") and not stripped.startswith(('"residual', '"ideal_gas')):
            depth, buffer = 1, line
        elif depth == 1:
            if stripped.startswith("]"):
                out.append(buffer + stripped)
                depth = 0
            else:
                buffer += stripped + (" " if stripped.endswith(",") else "")
        else:
            out.append(line)
    return "\n".join(out) + "\n"


for fluid, (name, authors, year, title, journal, doi) in PAPERS.items():
    source = json.loads(CP.get_fluid_param_string(fluid, "JSON"))[0]
    equation = source["EOS"][0]
    reducing = equation["STATES"]["reducing"]
    critical = source["STATES"]["critical"]
    document = {
        "fluid": fluid,
        "publication": {"authors": authors, "year": year, "title": title, "in": journal, "doi": doi},
        "gas_constant_j_per_mol_k": equation["gas_constant"],
        "critical_temperature_k": critical["T"],
        "critical_pressure_kpa": critical["p"] / 1000.0,
        "critical_density_mol_per_m3": round(critical["rhomolar"], 9),
        "published_range_k": [equation["Ttriple"], equation["T_max"]],
        "record": {
            "identifier": {"cas": source["INFO"]["CAS"].split(".")[0], "name": fluid},
            "molarweight": round(equation["molar_mass"] * 1000.0, 9),
            "tc": reducing["T"],
            "rhoc": round(reducing["rhomolar"], 9),
            "residual": [term(t) for t in equation["alphar"]],
            "ideal_gas": [term(t) for t in equation["alpha0"] if t["type"] not in NOT_PUBLISHED],
        },
    }
    (OUT / f"{name}.json").write_text(layout(document), encoding="utf-8")
    print(name, equation["BibTeX_EOS"])
