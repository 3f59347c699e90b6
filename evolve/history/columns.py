"""Every column a trajectory may have: unit, what it is, and the words of its flags."""

from typing import NamedTuple


class Column(NamedTuple):
    """Unit as astropy spells it, a name for people, and the meanings of a flag's values."""

    unit: str
    long_name: str
    flags: dict | None = None


TORQUE = "solMass solRad2 / yr2"
MOMENTUM = "solMass solRad2 / yr"
DONOR = {0: "none", 1: "A", 2: "B", 3: "both"}
KIND = {0: "none", 1: "nuclear", 2: "thermal", 3: "dynamical", 4: "angular_momentum"}


def _of_both(name, unit, long_name):
    return {f"{name}_{c}": Column(unit, long_name.format(c)) for c in "AB"}


COLUMNS = {
    "time": Column("yr", "time since the start"),
    "donor": Column("", "which component overflows", DONOR),
    **_of_both("mass", "solMass", "mass of {}"),
    **_of_both("core_mass", "solMass", "core mass of {}"),
    **_of_both("radius", "solRad", "radius of {}"),
    **_of_both("lobe", "solRad", "Roche-lobe radius of {}, at periastron"),
    **_of_both("fill", "", "radius of {} over that of its lobe"),
    **_of_both("luminosity", "solLum", "luminosity of {}"),
    **_of_both("temperature", "K", "effective temperature of {}"),
    "separation": Column("solRad", "separation (semi-major axis)"),
    "period": Column("h", "orbital period"),
    "eccentricity": Column("", "eccentricity"),
    "systemic_speed": Column("km / s", "speed that sudden losses and kicks gave the pair"),
    "mass_ratio": Column("", "mass ratio, donor over accretor"),
    "angular_momentum": Column(MOMENTUM, "orbital angular momentum"),
    "total_angular_momentum": Column(MOMENTUM, "orbital and spin angular momentum"),
    **_of_both("spin", "rad / yr", "spin of {}"),
    **_of_both("phase", "", "clock of the model of {}"),
    **_of_both("overflow", "solMass / yr", "overflow of {}"),
    **_of_both("wind", "solMass / yr", "wind of {}"),
    **_of_both("captured", "solMass / yr", "wind of {} captured by its companion"),
    **_of_both("accepted", "solMass / yr", "mass that {} accepts"),
    **_of_both("expelled", "solMass / yr", "mass that reaches {} and is expelled"),
    "torque_waves": Column(TORQUE, "torque of gravitational waves on the orbit"),
    "torque_braking": Column(TORQUE, "torque of magnetic braking"),
    "torque_wind": Column(TORQUE, "torque of the winds on the orbit"),
    "torque_expelled": Column(TORQUE, "torque of the expelled matter on the orbit"),
    "torque_consequential": Column(TORQUE, "consequential torque on the orbit"),
    "torque_tides": Column(TORQUE, "torque of the tides on the orbit"),
    "zeta_star": Column("", "d ln R / d ln m of the donor"),
    "zeta_lobe": Column("", "d ln R_L / d ln m of the donor's lobe"),
    "thermal_time": Column("yr", "thermal time of the donor"),
    "transfer_time": Column("yr", "donor mass over its overflow"),
    "dynamical_time": Column("yr", "dynamical time of the donor"),
    "overflow_kind": Column("", "what drives the overflow", KIND),
    "period_derivative": Column("", "derivative of the period, s/s"),
    "accretion_luminosity": Column("solLum", "accretion luminosity"),
    "disc_critical_rate": Column("solMass / yr", "rate above which the disc is stable"),
    "wave_frequency": Column("Hz", "gravitational-wave frequency, 2/P"),
    "wave_strain": Column("", "strain amplitude h0"),
    **_of_both("K", "km / s", "velocity semi-amplitude of {}"),
    **_of_both("mass_function", "solMass", "mass function measured from {}"),
    "donor_density": Column("g / cm3", "mean density of the donor"),
}


def attributes_of(name):
    """What tells a reader of a file about a column.

    Parameters
    ----------
    name : str

    Returns
    -------
    dict
        units, long_name; of a flag also flag_values (ndarray of int8) and flag_meanings.
    """
    column = COLUMNS[name]
    told = {"units": column.unit, "long_name": column.long_name}
    if column.flags:
        import numpy as np

        told["flag_values"] = np.array(list(column.flags), dtype=np.int8)
        told["flag_meanings"] = " ".join(column.flags.values())
    return told
