"""Properties of liquids and gases by CoolProp, iapws and chemicals; prints JSON.

Each row says how well the library's own source knows the value ("uncertainty", relative) or, where library and
program use the same published formulation, "same": they then agree to the rounding of what goes in.

What stands behind the libraries: water, IAPWS-95, R12-08 and R1-76 (iapws); air and nitrogen, Lemmon et al. 2000, Span
et al. 2000 and Lemmon & Jacobsen 2004; ethanol, Schroeder et al. 2014 and Kiselev et al. 2005; glycerol-water and
ethanol-water, Melinder 2010, up to a mass fraction of 0.6; a polydimethylsiloxane of about 10 mm²/s, its maker's data
(all CoolProp); tension of ethanol, Jasper 1972 (chemicals).
"""

import json

import chemicals
import CoolProp
import iapws
from CoolProp.CoolProp import PropsSI
from iapws._iapws import _Tension, _Viscosity

ATMOSPHERE = 101325.0
rows = []


def row(fluid, quantity, temperature, pressure, value, uncertainty=None, **material):
    known = {"same": True} if uncertainty is None else {"uncertainty": uncertainty}
    where = {"fluid": fluid, **material, "property": quantity, "temperature": temperature, "pressure": pressure}
    rows.append({**where, "value": value, **known})


def kelvin(celsius):
    return round(celsius + 273.15, 2)


def water():
    for t in [kelvin(c) for c in (0.5, 4, 10, 15, 20, 25, 30, 39.5, 40.5, 60, 80, 99)]:
        for p in (ATMOSPHERE, 5e5, 1e6):
            density = iapws.IAPWS95(T=t, P=p / 1e6).rho
            row("water", "density", t, p, density, 1e-5)
            row("water", "viscosity", t, p, _Viscosity(density, t))
        row("water", "surface tension", t, ATMOSPHERE, _Tension(t))


def gases():
    for fluid, name in (("air", "Air"), ("nitrogen", "Nitrogen")):
        for t in [kelvin(c) for c in (-50, -20, 0, 20, 25, 60, 100)]:

            def of(key, p):
                return PropsSI(key, "T", t, "P", p, name)

            for p in (1e3, ATMOSPHERE, 3e5, 1e6):
                row(fluid, "density", t, p, of("D", p), 1e-3)
                row(fluid, "viscosity", t, p, of("V", p), 0.01)
                row(fluid, "thermal diffusivity", t, p, of("L", p) / (of("D", p) * of("C", p)), 0.02)
            row(fluid, "adiabatic index", t, ATMOSPHERE, of("C", ATMOSPHERE) / of("O", ATMOSPHERE), 2e-3)


def liquid(fluid, name, celsius, density, viscosity, **material):
    """By its name in CoolProp; the last two numbers are how well its source knows them."""
    for t in [kelvin(c) for c in celsius]:
        row(fluid, "density", t, ATMOSPHERE, PropsSI("D", "T", t, "P", ATMOSPHERE, name), density, **material)
        row(fluid, "viscosity", t, ATMOSPHERE, PropsSI("V", "T", t, "P", ATMOSPHERE, name), viscosity, **material)


def tension_of_ethanol():
    a, b = chemicals.interface.sigma_data_Jasper_Lange.loc["64-17-5"][["a", "b"]]
    for t in [kelvin(c) for c in (20, 25, 30, 40)]:
        tension = 1e-3 * (a - b * (t - 273.15))
        row("ethanol-water", "surface tension", t, ATMOSPHERE, tension, 0.01, mass_fraction=1.0)


def silicone():
    at = ("T", 298.15, "P", ATMOSPHERE, "INCOMP::S800")
    grade = PropsSI("V", *at) / PropsSI("D", *at)
    liquid("silicone oil", at[-1], (0, 10, 20, 25, 40, 60, 80, 100), 2e-3, 0.02, grade=grade)


water()
gases()
for w in (0.1, 0.2, 0.3, 0.4, 0.5, 0.6):
    liquid("glycerol-water", f"INCOMP::MGL[{w}]", (15, 20, 25, 30), 2e-3, 0.03, mass_fraction=w)
    liquid("ethanol-water", f"INCOMP::MEA[{w}]", (10, 15, 20, 25, 30, 40), 2e-3, 0.03, mass_fraction=w)
liquid("ethanol-water", "Ethanol", (10, 15, 20, 25, 30, 40), 5e-4, 0.02, mass_fraction=1.0)
tension_of_ethanol()
silicone()

versions = {"CoolProp": CoolProp.__version__, "iapws": iapws.__version__, "chemicals": chemicals.__version__}
lines = ",\n".join(json.dumps(entry) for entry in rows)
print(f'{{"versions": {json.dumps(versions)}, "rows": [\n{lines}\n]}}')
