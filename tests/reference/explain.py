"""State points of the hours that tests/explain.rs explains, made with CoolProp 8.0.0.

    cargo build && python tests/reference/explain.py > tests/reference/explain.csv

Takes the four temperatures that `explain` states for each running machine and looks everything else up.
"""

import json
import re
import subprocess
from pathlib import Path

from CoolProp.CoolProp import PropsSI

ROOT = Path(__file__).resolve().parents[2]
TEST = (ROOT / "tests/explain.rs").read_text()
BRIEFS = dict(re.findall(r'const (\w+): &str = "(briefs/[^"]+)";', TEST))
HOURS = re.findall(r'\(\s*"(\w+)",\s*(TERRACE|GROUND),\s*"([^"]+)",\s*&\[([^\]]+)\],?\s*\)', TEST)
FLUIDS = {"TERRACE": "R290", "GROUND": "R410A"}

print("hour,part,refrigerant,evaporating_c,condensing_c,suction_c,liquid_c,evaporating_kpa,condensing_kpa,"
      "suction_kg_per_m3,suction_less_liquid_kj_per_kg,isentropic_work_kj_per_kg")
for name, brief, choice, hour in HOURS:
    command = [ROOT / "target/debug/winterledger", "explain", BRIEFS[brief], "--choice", choice]
    command += re.findall(r'"([^"]+)"', hour) + ["--format", "json"]
    answer = json.loads(subprocess.run(command, cwd=ROOT, capture_output=True, check=True).stdout)
    fluid = FLUIDS[brief]
    for part in answer["parts"]:
        if "states" not in part:
            continue
        lines = {line["what"]: line["value"] for line in part["lines"]}
        te, tc = round(lines["evaporating"], 4), round(lines["condensing"], 4)
        t1, t3 = (round(part["states"][i]["temperature_c"], 4) for i in (0, 2))
        kelvin = 273.15
        # R410A is pseudo-pure: the liquid line condenses, the vapour line evaporates, as the program has one pressure for both.
        pe = PropsSI("P", "T", te + kelvin, "Q", 1, fluid)
        pc = PropsSI("P", "T", tc + kelvin, "Q", 1, fluid)
        h1 = PropsSI("H", "T", t1 + kelvin, "P", pe, fluid)
        s1 = PropsSI("S", "T", t1 + kelvin, "P", pe, fluid)
        d1 = PropsSI("D", "T", t1 + kelvin, "P", pe, fluid)
        h3 = PropsSI("H", "T", t3 + kelvin, "P", pc, fluid)
        h2 = PropsSI("H", "P", pc, "S", s1, fluid)
        print(name, f'"{part["title"]}"', fluid, te, tc, t1, t3, *(f"{x:.6g}" for x in (pe / 1e3, pc / 1e3, d1, (h1 - h3) / 1e3, (h2 - h1) / 1e3)), sep=",")
