"""Formulas of gate drive and commutation, on plain numbers in SI units.

Each names its published source; what is common knowledge of the trade says so.
"""

import math


def induced_gate_voltage(
    resistance: float, miller: float, inputs: float, rate: float, voltage: float
) -> float:
    """Volts that an edge pushes onto a gate held off through a resistance.

    R Cgd s (1 - exp(-V / (R Ciss s))), Ciss = Cgs + Cgd (`inputs`), s in V/s, V the edge's height:
    the exact answer of the first-order circuit for a ramp (expression from memory; checked by
    integration).
    """
    if rate <= 0.0 or resistance <= 0.0:
        return 0.0
    return resistance * miller * rate * -math.expm1(-voltage / (resistance * inputs * rate))


def capacitive_bound(miller: float, inputs: float, voltage: float) -> float:
    """Volts that the same edge pushes onto a gate that nothing holds: V Cgd / (Cgd + Cgs).

    The capacitive divider of the trade's application notes.
    """
    return voltage * miller / inputs


def gate_power(charge: float, swing: float, frequency: float) -> float:
    """Watts that charging and discharging a gate takes: Q dV f (application notes, from memory)."""
    return charge * swing * frequency


def bootstrap_charge(
    gate_charge: float, standing_current: float, on_time: float, extra_charge: float
) -> float:
    """Coulombs that a bootstrap capacitor gives in one on-time: Qg + I t + Qls.

    Level-shift charge Qls and all standing currents included (application notes on bootstrap
    supplies).
    """
    return gate_charge + standing_current * on_time + extra_charge
