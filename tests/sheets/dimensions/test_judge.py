"""Units through formulas: right conversions are no finding, wrong ones are, empirical formulas are not judged."""

import pytest

from cellfuncs.sheets.dimensions import judge

PIPE = {
    "A1": "Mean velocity", "B1": 2.0, "C1": "m/s",
    "A2": "Inside diameter", "B2": 25.0, "C2": "mm",
    "A3": "Density", "B3": 998.0, "C3": "kg/m³",
    "A4": "Dynamic viscosity", "B4": 1.0, "C4": "mPa·s",
    "A5": "Volume flow", "B5": 3.5, "C5": "m³/h",
    "A6": "Specific heat", "B6": 4.18, "C6": "kJ/kgK",
    "A7": "Thermal conductivity", "B7": 0.6, "C7": "W/mK",
    "A8": "Pressure drop", "B8": 0.2, "C8": "bar",
    "A9": "Inlet temperature", "B9": 20.0, "C9": "°C",
    "A10": "Outlet temperature", "B10": 35.0, "C10": "°C",
    "A11": "Friction factor", "B11": 0.02, "C11": "-",
    "A12": "Length", "B12": 6.0, "C12": "m",
    "A13": "Gauge pressure", "B13": 3.0, "C13": "barg",
    "A14": "Mass flow", "B14": 1.2, "C14": "kg/s",
    "A15": "Specific gas constant", "B15": 287.0, "C15": "J/kgK",
    "A16": "Gas temperature", "B16": 300.0, "C16": "K",
    "A17": "Surface temperature", "B17": 95.0, "C17": "°F",
    "A18": "Heat transfer coefficient", "B18": 500.0, "C18": "W/m²K",
    "A19": "Heat transfer area", "B19": 2.0, "C19": "m²",
    "A20": "Absolute pressure", "B20": 4.0, "C20": "bar",
    "A21": "Rotational speed", "B21": 1450.0, "C21": "rpm",
    "A22": "Kinematic viscosity", "B22": 1.0, "C22": "cSt",
    "A23": "Pipe run", "B23": 20.0, "C23": "ft",
    "A24": "Reynolds number", "B24": 50000.0, "C24": "-",
    "A25": "Prandtl number", "B25": 7.0, "C25": "-",
    "A28": "Casing diameter", "B28": 50.0, "C28": "mm", "A29": "Wall thickness", "B29": 2.0, "C29": "mm",
    "A26": "Time", "B26": 5.0, "C26": "min", "A27": "Time constant", "B27": 900.0, "C27": "s",
}  # fmt: skip

# label of the result, its unit, formula, code of the finding (None: nothing to report)
CASES = [
    ("Reynolds number", "-", "=B3*B1*B2/B4", None),  # mm over mPa s: the thousands cancel
    ("Reynolds number", "-", "=B3*B1*B2/1000/(B4/1000)", None),
    ("Reynolds number", "-", "=B3*B1*(B2*1E-3)/(B4*0.001)", None),
    ("Reynolds number", "-", "=B3*B1*B2/(B4/1000)", "unit-factor"),
    ("Reynolds number", "-", "=B1*B2/B22", "unit-factor"),
    ("Reynolds number", "-", "=B1*B2/1000/(B22*10^-6)", None),
    ("Reynolds number", "-", "=B1*B2/B4", "dimension-mismatch"),
    ("Prandtl number", "-", "=B4*B6/B7", None),  # mPa s with kJ
    ("Prandtl number", "-", "=B4/1000*B6/B7", "unit-factor"),
    ("Mean velocity", "m/s", "=B5/3600/(PI()/4*(B2/1000)^2)", None),
    ("Mean velocity", "m/s", "=4*B5/(3600*PI()*(B2/1000)^2)", None),
    ("Mean velocity", "m/s", "=B5/(PI()/4*(B2/1000)^2)", "unit-factor"),
    ("Mean velocity", "m/s", "=B5/60/(PI()/4*(B2/1000)^2)", "unit-factor"),
    ("Mean velocity", "m/s", "=B5/3600/(PI()/4*B2^2)", "unit-factor"),
    ("Mean velocity", "m/s", "=B5/3600/(PI()*B2/1000)", "dimension-mismatch"),
    ("Mean velocity", "m/s", "=B14/B3/(PI()/4*(B2/1000)^2)", None),
    ("Mean velocity", "m/s", "=353.7*B5/B2^2", None),  # all units in one number: not judged
    ("Mean velocity", "m/s", "=PI()*B2/1000*B21/60", None),
    ("Mass flow", "kg/s", "=B3*B5/3600", None),
    ("Mass flow", "kg/h", "=B3*B5", None),
    ("Mass flow", "kg/s", "=B3*B5", "unit-factor"),
    ("Duty", "kW", "=B14*B6*(B10-B9)", None),
    ("Duty", "W", "=B14*B6*1000*(B10-B9)", None),
    ("Duty", "W", "=B14*B6*(B10-B9)", "unit-factor"),
    ("Duty", "kW", "=1.1*B14*B6*(B10-B9)", None),  # a margin
    ("Duty", "W", "=1.1*B14*B6*(B10-B9)", "unit-factor"),
    ("Duty", "kW", "=B14*(B10-B9)", "dimension-mismatch"),
    ("Duty", "kW", "=B18*B19*(B10-B9)/1000", None),
    ("Duty", "kW", "=B18*B19*(B10-B9)", "unit-factor"),
    ("Duty", "kW", "=B14*4.18*(B10-B9)", None),  # the specific heat of water as a number
    ("Duty", "kW", "=0.9*B14*3.7*(B10-B9)", None),  # numbers of unknown unit: not judged
    ("Pressure drop", "Pa", "=B11*B12/(B2/1000)*B3*B1^2/2", None),
    ("Pressure drop", "kPa", "=B11*B12/(B2/1000)*B3*B1^2/2/1000", None),
    ("Pressure drop", "bar", "=B11*B12/(B2/1000)*B3*B1^2/2*1E-5", None),
    ("Pressure drop", "kPa", "=B11*B12/(B2/1000)*B3*B1^2/2", "unit-factor"),
    ("Pressure drop", "Pa", "=B11*B12/B2*B3*B1^2/2", "unit-factor"),
    ("Pressure drop", "Pa", "=B11*B12/(B2/1000)*B3*B1/2", "dimension-mismatch"),
    ("Pressure drop", "Pa", "=B11*B23*0.3048/(B2/1000)*B3*B1^2/2", None),
    ("Pressure drop", "Pa", "=B11*B23/(B2/1000)*B3*B1^2/2", "unit-factor"),
    ("Head", "m", "=B8*100000/(B3*9.81)", None),
    ("Head", "m", "=B8/(B3*9.81)", "unit-factor"),
    ("Hydraulic power", "kW", "=B5/3600*B8*100", None),
    ("Hydraulic power", "kW", "=B5/36*B8", None),
    ("Hydraulic power", "W", "=B5*B8", "unit-factor"),
    ("Density", "kg/m³", "=B20*1E5/(B15*B16)", None),
    ("Density", "kg/m³", "=B20*1E5/(B15*(B9+273.15))", None),
    ("Density", "kg/m³", "=B20*1E5/(B15*B9)", "celsius-for-kelvin"),
    ("Density", "kg/m³", "=B13*1E5/(B15*B16)", "gauge-for-absolute"),
    ("Density", "kg/m³", "=(B13+1.01325)*1E5/(B15*B16)", None),
    ("Pressure", "bar", "=B13+1.013", None),
    ("Pressure", "bar", "=B13", "gauge-for-absolute"),
    ("Property temperature", "°C", "=(B9+B10)/2", None),
    ("Property temperature", "°C", "=AVERAGE(B9,B10)", None),
    ("Property temperature", "°C", "=(B10-B9)/2", "dimension-mismatch"),
    ("Property temperature", "°C", "=B9+(B10-B9)/2", None),
    ("Property temperature", "K", "=(B9+B10)/2+273.15", None),
    ("Property temperature", "K", "=(B9+B10)/2", "celsius-for-kelvin"),
    ("Property temperature", "°C", "=(B17-32)/1.8", None),
    ("Property temperature", "°C", "=(B17-32)*5/9", None),
    ("Property temperature", "°C", "=B17", "unit-factor"),
    ("Property temperature", "°C", "=B9+5", None),
    ("Temperature difference", "K", "=B10-B9", None),
    ("Temperature difference", "K", "=B10", "dimension-mismatch"),
    ("Temperature difference", "K", "=B14*0+B10-B14", "dimension-mismatch"),  # kg/s from °C
    ("Expansion coefficient", "1/K", "=1/(B9+273.15)", None),
    ("Expansion coefficient", "1/K", "=1/B9", "celsius-for-kelvin"),
    ("Log mean temperature difference", "K", "=((B10-B9)-(B10-B16+273.15))/LN((B10-B9)/(B10-B16+273.15))", None),
    ("Nusselt number", "-", "=0.023*B24^0.8*B25^0.4", None),
    ("Nusselt number", "-", "=LN(B1)", "dimension-mismatch"),
    ("Nusselt number", "-", "=EXP(B2)", "dimension-mismatch"),
    ("Nusselt number", "-", "=EXP(0-(B26*60)/B27)", None),
    ("Nusselt number", "-", "=1-EXP(-B26*60/B27)", None),
    ("Nusselt number", "-", "=EXP(-B26/B27)", "unit-factor"),
    ("Nusselt number", "-", "=LN(B10+273.15)-LN(B9+273.15)", None),
    ("Heat transfer coefficient", "W/m²K", "=5.7+3.8*B1", None),  # empirical
    ("Heat transfer coefficient", "W/m²K", "=B24*B7/(B2/1000)", None),
    ("Heat transfer coefficient", "W/m²K", "=B24*B7/B2", "unit-factor"),
    ("Dynamic viscosity", "Pa·s", "=B22*1E-6*B3", None),
    ("Dynamic viscosity", "mPa·s", "=B22*B3/1000", None),
    ("Dynamic viscosity", "mPa·s", "=0.0012*EXP(550/(B9+135))", None),  # a fit
    ("Friction factor", "-", "=IF(B24<2300,64/B24,0.3164/B24^0.25)", None),
    ("Friction factor", "-", "=0.3164*B24^-0.25", None),
    ("Volume flow", "m³/h", "=B14/B3*3600", None),
    ("Volume flow", "L/min", "=B14/B3*60000", None),
    ("Volume flow", "m³/h", "=B14/B3*1000", "unit-factor"),
    ("Flow area", "m²", "=PI()/4*((B28/1000)^2-(B2/1000)^2)", None),
    ("Flow area", "m²", "=PI()/4*(B28^2-B2^2)/1000000", None),
    ("Flow area", "m²", "=PI()/4*(B28^2-B2^2)", "unit-factor"),
    ("Outside diameter", "m", "=B2/1000+2*B29/1000", None),
    ("Outside diameter", "mm", "=B2+2*B29", None),
    ("Outside diameter", "m", "=B12+2*B29", "unit-factor"),
    ("Radiant heat loss", "W", "=0.9*5.67E-8*B19*((B10+273.15)^4-(B9+273.15)^4)", None),
    ("Radiant heat loss", "W", "=0.9*5.67*B19*(((B10+273.15)/100)^4-((B9+273.15)/100)^4)", None),
    ("Radiant heat loss", "W", "=0.9*5.67E-8*B19*(B10^4-B9^4)", "celsius-for-kelvin"),
    ("Density", "kg/m³", "=B20*100/(0.287*(B9+273.15))", None),
    ("Shaft power", "kW", "=B5/3600*B12*B3*9.81/1000/0.72", None),
    ("Shaft power", "kW", "=B5*B12/(367*0.72)", None),
    ("Reynolds number", "-", "=354*B14*3600/(B2*B4)", None),
    ("Kinematic viscosity", "cSt", "=B4/1000/B3*1E6", None),
    ("Kinematic viscosity", "cSt", "=B4/B3*1000", None),
    ("Kinematic viscosity", "cSt", "=B4/B3", "unit-factor"),
    ("Log mean temperature difference", "K", "=IF(ABS(B10-B9)<0.1,B10-B9,((B10-B9)-5)/LN((B10-B9)/5))", None),
    # numbers that may carry a unit: the dimension of the result is open
    ("Duty", "W", "=500*B5*(B10-B9)", None),
    ("Duty", "W", "=6.5*B19*(B10-B9)", None),
    ("Duty", "W", "=10*B19*(B10-B9)", None),
    ("Duty", "W", "=25*B19*(B10-B9)", None),
    ("Duty", "W", "=1.08*B5*(B10-B9)", None),
    ("Reynolds number", "-", "=998*B1*B2/1000/0.001", None),
    ("Reynolds number", "-", "=1000*B1*B2/1000/0.001", None),
    ("Reynolds number", "-", "=B1*B2/1000/1.004E-6", None),
    ("Mean velocity", "ft/s", "=0.4085*B5/B2^2", None),
    ("Head", "m", "=B8*10.2", None),
    ("Head", "ft", "=B8*14.5038*2.31", None),
    ("Head", "ft", "=B8*2.31", "unit-factor"),
    ("Duty", "kW", "=4.187*B14*(B10-B9)", None),
    ("Duty", "kW", "=B14+B6", "dimension-mismatch"),
    ("Duty", "kW", "=SUM(B1,B2)", "dimension-mismatch"),
    ("Mean velocity", "m/s", "=UNKNOWN.FUNCTION(B1,B2)", None),
    ("Mean velocity", "m/s", "=B99*B2", None),  # an empty cell
]  # fmt: skip


@pytest.mark.parametrize(("label", "unit", "formula", "code"), CASES, ids=[f"{c[0]} {c[1]} {c[2]}" for c in CASES])
def test_a_formula_is_judged_by_its_units(read, label, unit, formula, code):
    reading = read({**PIPE, "A30": label, "B30": (formula, 1.0), "C30": unit})
    assert "Sheet1!B30" in reading.quantities, reading.notes.notes
    found = [f for f in judge.findings(reading) if f.cell == "Sheet1!B30"]
    assert [f.code for f in found] == ([code] if code else []), [f.message for f in found]


def test_a_cell_without_label_carries_its_units_on(read):
    cells = {**PIPE, "E1": ("=B2/1000", 0.025), "E2": ("=PI()/4*E1^2", 1.0), "E3": ("=B5/3600", 1.0)}
    right = read({**cells, "A30": "Mean velocity", "B30": ("=E3/E2", 1.0), "C30": "m/s"})
    wrong = read({**cells, "A30": "Mean velocity", "B30": ("=B5/E2", 1.0), "C30": "m/s"})
    assert not list(judge.findings(right))
    assert [f.code for f in judge.findings(wrong)] == ["unit-factor"]


def test_a_wrong_cell_does_not_make_others_wrong(read):
    """What follows is judged by what cells state."""
    cells = {**PIPE, "A30": "Mass flow", "B30": ("=B3*B5", 1.0), "C30": "kg/s"}
    reading = read({**cells, "A31": "Duty", "B31": ("=B30*B6*(B10-B9)", 1.0), "C31": "kW"})
    assert [f.cell for f in judge.findings(reading)] == ["Sheet1!B30"]
