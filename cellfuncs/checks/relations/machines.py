"""Pumps and fans. SI units."""

from cellfuncs.checks.relation import relation
from cellfuncs.groups import STANDARD_GRAVITY


@relation("hydraulic power", "hydraulic_power")
def hydraulic_power(any_drop, volume_flow):
    """P = ΔpV̇."""
    return any_drop * volume_flow


@relation("hydraulic power from head", "hydraulic_power")
def hydraulic_power_of_head(density, volume_flow, head, gravity=STANDARD_GRAVITY):
    """P = ρgV̇H."""
    return density * gravity * volume_flow * head


@relation("hydraulic power from mass flow and head", "hydraulic_power")
def hydraulic_power_of_mass(mass_flow, head, gravity=STANDARD_GRAVITY):
    """P = ṁgH."""
    return mass_flow * gravity * head


@relation("shaft power", "shaft_power")
def shaft_power(hydraulic_power, pump_efficiency):
    """P = P_hyd/η."""
    return hydraulic_power / pump_efficiency


@relation("shaft power from head", "shaft_power")
def shaft_power_of_head(density, volume_flow, head, pump_efficiency, gravity=STANDARD_GRAVITY):
    """P = ρgV̇H/η."""
    return density * gravity * volume_flow * head / pump_efficiency


@relation("shaft power from pressure drop", "shaft_power")
def shaft_power_of_drop(any_drop, volume_flow, pump_efficiency):
    """P = ΔpV̇/η."""
    return any_drop * volume_flow / pump_efficiency


@relation("motor power", "motor_power")
def motor_power(shaft_power, motor_efficiency):
    """P = P_shaft/η."""
    return shaft_power / motor_efficiency


@relation("power lost to friction", "friction_power")
def friction_power(pressure_drop, volume_flow):
    """P = ΔpV̇."""
    return pressure_drop * volume_flow
