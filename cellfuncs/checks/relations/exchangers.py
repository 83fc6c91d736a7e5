"""Two streams: terminal and mean differences, UA, NTU, effectiveness. Temperatures in K."""

from math import exp, log, log10

from cellfuncs.checks.relation import relation

_COCURRENT = ("cocurrent", "parallel", "parallel flow", "co-current")


def _cocurrent(case) -> bool:
    return case.facts.get("arrangement") in _COCURRENT


def _counter(case) -> bool:
    return case.facts.get("arrangement") not in _COCURRENT


def log_mean(a: float, b: float, logarithm=log) -> float:
    """Log mean of two differences of one sign [K]."""
    if abs(a / b - 1.0) < 1e-9:
        return a
    return (a - b) / logarithm(a / b)


def _mean(terminal_difference_1, terminal_difference_2):
    return (terminal_difference_1 + terminal_difference_2) / 2.0


def _tens(terminal_difference_1, terminal_difference_2):
    return log_mean(terminal_difference_1, terminal_difference_2, log10)


def _counter_ends(hi, ho, ci, co):
    return abs(hi - co), abs(ho - ci)


def _co_ends(hi, ho, ci, co):
    return abs(hi - ci), abs(ho - co)


def _way(ends, average):
    def value(hot_inlet_temperature, hot_outlet_temperature, cold_inlet_temperature, cold_outlet_temperature):
        return average(
            *ends(hot_inlet_temperature, hot_outlet_temperature, cold_inlet_temperature, cold_outlet_temperature)
        )

    return value


def _arithmetic(a, b):
    return (a + b) / 2.0


def _log_tens(a, b):
    return log_mean(a, b, log10)


@relation("terminal difference at the hot end, countercurrent", "terminal_difference_1", when=_counter)
def hot_end(hot_inlet_temperature, cold_outlet_temperature):
    """Thi − Tco."""
    return abs(hot_inlet_temperature - cold_outlet_temperature)


@relation("terminal difference at the cold end, countercurrent", "terminal_difference_2", when=_counter)
def cold_end(hot_outlet_temperature, cold_inlet_temperature):
    """Tho − Tci."""
    return abs(hot_outlet_temperature - cold_inlet_temperature)


@relation("terminal difference at the inlet, cocurrent", "terminal_difference_1", when=_cocurrent)
def inlet_end(hot_inlet_temperature, cold_inlet_temperature):
    """Thi − Tci."""
    return abs(hot_inlet_temperature - cold_inlet_temperature)


@relation("terminal difference at the outlet, cocurrent", "terminal_difference_2", when=_cocurrent)
def outlet_end(hot_outlet_temperature, cold_outlet_temperature):
    """Tho − Tco."""
    return abs(hot_outlet_temperature - cold_outlet_temperature)


@relation("terminal difference at the inlet, constant wall", "terminal_difference_1")
def wall_inlet_end(wall_temperature, inlet_temperature):
    """|Tw − Tin|."""
    return abs(wall_temperature - inlet_temperature)


@relation("terminal difference at the outlet, constant wall", "terminal_difference_2")
def wall_outlet_end(wall_temperature, outlet_temperature):
    """|Tw − Tout|."""
    return abs(wall_temperature - outlet_temperature)


@relation("log mean difference of the ends", "log_mean_difference", wrong=(
    ("mean-difference", "the arithmetic mean of the ends", _mean),
    ("log-base", "the logarithm to base 10", _tens),
))  # fmt: skip
def log_mean_of_ends(terminal_difference_1, terminal_difference_2):
    """(ΔT1 − ΔT2)/ln(ΔT1/ΔT2)."""
    return log_mean(terminal_difference_1, terminal_difference_2)


@relation("log mean difference, countercurrent", "log_mean_difference", when=_counter, wrong=(
    ("mean-difference", "the arithmetic mean of the ends", _way(_counter_ends, _arithmetic)),
    ("mean-difference", "the ends of cocurrent flow", _way(_co_ends, log_mean)),
    ("log-base", "the logarithm to base 10", _way(_counter_ends, _log_tens)),
))  # fmt: skip
def counter_log_mean(hot_inlet_temperature, hot_outlet_temperature, cold_inlet_temperature, cold_outlet_temperature):
    """Log mean of Thi − Tco and Tho − Tci."""
    return log_mean(
        *_counter_ends(hot_inlet_temperature, hot_outlet_temperature, cold_inlet_temperature, cold_outlet_temperature)
    )


@relation("log mean difference, cocurrent", "log_mean_difference", when=_cocurrent, wrong=(
    ("mean-difference", "the arithmetic mean of the ends", _way(_co_ends, _arithmetic)),
    ("mean-difference", "the ends of countercurrent flow", _way(_counter_ends, log_mean)),
    ("log-base", "the logarithm to base 10", _way(_co_ends, _log_tens)),
))  # fmt: skip
def co_log_mean(hot_inlet_temperature, hot_outlet_temperature, cold_inlet_temperature, cold_outlet_temperature):
    """Log mean of Thi − Tci and Tho − Tco."""
    return log_mean(
        *_co_ends(hot_inlet_temperature, hot_outlet_temperature, cold_inlet_temperature, cold_outlet_temperature)
    )


@relation("log mean difference, constant wall", "log_mean_difference", wrong=(
    ("mean-difference", "the arithmetic mean of the ends",
     lambda wall_temperature, inlet_temperature, outlet_temperature:
     abs(wall_temperature - (inlet_temperature + outlet_temperature) / 2.0)),
    ("log-base", "the logarithm to base 10", lambda wall_temperature, inlet_temperature, outlet_temperature:
     log_mean(abs(wall_temperature - inlet_temperature), abs(wall_temperature - outlet_temperature), log10)),
))  # fmt: skip
def wall_log_mean(wall_temperature, inlet_temperature, outlet_temperature):
    """Log mean of |Tw − Tin| and |Tw − Tout|."""
    return log_mean(abs(wall_temperature - inlet_temperature), abs(wall_temperature - outlet_temperature))


@relation("duty of an exchanger", "duty", source="definition of U")
def exchanger_duty(any_overall, any_area, log_mean_difference, correction_factor=1.0):
    """Q = UAFΔT_lm."""
    return any_overall * any_area * correction_factor * log_mean_difference


@relation("duty from UA", "duty", source="definition of UA")
def duty_of_conductance(conductance, log_mean_difference, correction_factor=1.0):
    """Q = UA·FΔT_lm."""
    return conductance * correction_factor * log_mean_difference


@relation("conductance", "conductance")
def conductance(any_overall, any_area):
    """UA = U·A."""
    return any_overall * any_area


@relation("smaller capacity rate", "smallest_capacity_rate")
def smaller(hot_capacity_rate, cold_capacity_rate):
    """min(Ch, Cc)."""
    return min(hot_capacity_rate, cold_capacity_rate)


@relation("larger capacity rate", "largest_capacity_rate")
def larger(hot_capacity_rate, cold_capacity_rate):
    """max(Ch, Cc)."""
    return max(hot_capacity_rate, cold_capacity_rate)


@relation("capacity ratio", "capacity_ratio")
def ratio(smallest_capacity_rate, largest_capacity_rate):
    """Cmin/Cmax."""
    return smallest_capacity_rate / largest_capacity_rate


@relation("largest possible duty", "largest_duty")
def largest(smallest_capacity_rate, hot_inlet_temperature, cold_inlet_temperature):
    """Cmin(Thi − Tci)."""
    return smallest_capacity_rate * (hot_inlet_temperature - cold_inlet_temperature)


@relation("transfer units", "transfer_units")
def transfer_units(conductance, smallest_capacity_rate):
    """NTU = UA/Cmin."""
    return conductance / smallest_capacity_rate


@relation("transfer units from U and A", "transfer_units")
def transfer_units_of_area(any_overall, any_area, smallest_capacity_rate):
    """NTU = UA/Cmin."""
    return any_overall * any_area / smallest_capacity_rate


@relation("transfer units of a stream", "transfer_units")
def stream_units(any_coefficient, any_area, mass_flow, specific_heat):
    """NTU = hA/(ṁcp)."""
    return any_coefficient * any_area / (mass_flow * specific_heat)


@relation("effectiveness from duty", "effectiveness")
def effectiveness_of_duty(duty, largest_duty):
    """ε = Q/Qmax."""
    return duty / largest_duty


@relation("duty from effectiveness", "duty")
def duty_of_effectiveness(effectiveness, largest_duty):
    """Q = εQmax."""
    return effectiveness * largest_duty


def counter_effectiveness(n: float, r: float) -> float:
    """Effectiveness of countercurrent flow from NTU and the capacity ratio."""
    if abs(r - 1.0) < 1e-9:
        return n / (1.0 + n)
    e = exp(-n * (1.0 - r))
    return (1.0 - e) / (1.0 - r * e)


def co_effectiveness(n: float, r: float) -> float:
    """Effectiveness of cocurrent flow from NTU and the capacity ratio."""
    return (1.0 - exp(-n * (1.0 + r))) / (1.0 + r)


@relation("effectiveness, countercurrent", "effectiveness", source="Kays and London 1984", when=lambda case:
          case.facts.get("arrangement", "countercurrent") == "countercurrent", wrong=(
    ("mean-difference", "the formula of cocurrent flow", lambda transfer_units, capacity_ratio:
     co_effectiveness(transfer_units, capacity_ratio)),
))  # fmt: skip
def effectiveness_counter(transfer_units, capacity_ratio):
    """ε = (1 − e^(−N(1−R)))/(1 − R·e^(−N(1−R)))."""
    return counter_effectiveness(transfer_units, capacity_ratio)


@relation("effectiveness, cocurrent", "effectiveness", source="Kays and London 1984", when=_cocurrent, wrong=(
    ("mean-difference", "the formula of countercurrent flow", lambda transfer_units, capacity_ratio:
     counter_effectiveness(transfer_units, capacity_ratio)),
))  # fmt: skip
def effectiveness_co(transfer_units, capacity_ratio):
    """ε = (1 − e^(−N(1+R)))/(1 + R)."""
    return co_effectiveness(transfer_units, capacity_ratio)


@relation("effectiveness against a constant temperature", "effectiveness", source="Kays and London 1984",
          when=lambda case: "capacity_ratio" not in case.stated)  # fmt: skip
def effectiveness_single(transfer_units):
    """ε = 1 − e^(−N)."""
    return 1.0 - exp(-transfer_units)


@relation("outlet temperature at a constant wall", "outlet_temperature", source="energy balance")
def outlet_of_units(wall_temperature, inlet_temperature, transfer_units):
    """Tout = Tw − (Tw − Tin)·e^(−NTU)."""
    return wall_temperature - (wall_temperature - inlet_temperature) * exp(-transfer_units)


@relation("outlet temperature of a heated stream", "outlet_temperature", source="energy balance")
def outlet_of_duty(inlet_temperature, duty, mass_flow, specific_heat):
    """Tout = Tin + Q/(ṁcp)."""
    return inlet_temperature + duty / (mass_flow * specific_heat)


@relation("outlet temperature of the hot stream", "hot_outlet_temperature", source="energy balance")
def hot_outlet(hot_inlet_temperature, duty, hot_capacity_rate):
    """Tho = Thi − Q/Ch."""
    return hot_inlet_temperature - duty / hot_capacity_rate


@relation("outlet temperature of the cold stream", "cold_outlet_temperature", source="energy balance")
def cold_outlet(cold_inlet_temperature, duty, cold_capacity_rate):
    """Tco = Tci + Q/Cc."""
    return cold_inlet_temperature + duty / cold_capacity_rate
