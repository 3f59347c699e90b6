"""Constants and unit values: the only place where a physical number of nature stands.

Internal units everywhere in the package: solar mass, solar radius, Julian year, solar
luminosity, kelvin. GM_sun is primary (IAU 2015 Resolution B3 nominal value); G itself
only turns GM into kilograms, so its poor accuracy (2e-5) touches nothing but the numbers
that are published in grams.

References
----------
IAU 2015 Resolution B3 (Prsa et al. 2016, AJ 152, 41); IAU 2012 Resolution B2 (au);
CODATA 2022 (G, k, m_u, sigma_T, m_p; G is the same in the 2018 set).
"""

from math import pi

# SI values -----------------------------------------------------------------------------
GM_SUN_SI = 1.3271244e20  # m3 s-2, nominal
R_SUN_SI = 6.957e8  # m, nominal
L_SUN_SI = 3.828e26  # W, nominal
T_SUN = 5772.0  # K, nominal effective temperature
C_SI = 299792458.0  # m s-1, exact
G_SI = 6.67430e-11  # m3 kg-1 s-2, CODATA 2022 (u = 1.5e-15)
BOLTZMANN_SI = 1.380649e-23  # J K-1, exact
ATOMIC_MASS_SI = 1.66053906892e-27  # kg, CODATA 2022
PROTON_MASS_SI = 1.67262192595e-27  # kg, CODATA 2022
THOMSON_SI = 6.6524587051e-29  # m2, CODATA 2022
STEFAN_BOLTZMANN_SI = 5.6703744191844314e-8  # W m-2 K-4, exact
AU_SI = 149597870700.0  # m, exact
PC_SI = 648000.0 / pi * AU_SI  # m, IAU 2015 B2
YEAR_SI = 31557600.0  # s, Julian year
M_SUN_SI = GM_SUN_SI / G_SI  # kg
GM_EARTH_SI = 3.986004e14  # m3 s-2, nominal
GM_JUPITER_SI = 1.2668653e17  # m3 s-2, nominal
R_EARTH_SI = 6378100.0  # m, nominal equatorial
R_JUPITER_SI = 71492000.0  # m, nominal equatorial

# Internal units (solMass, solRad, yr, solLum, K) -----------------------------------------
G = GM_SUN_SI * YEAR_SI**2 / R_SUN_SI**3  # solRad3 solMass-1 yr-2
C = C_SI * YEAR_SI / R_SUN_SI  # solRad yr-1
ENERGY_PER_LUMINOSITY_YEAR = L_SUN_SI * YEAR_SI**3 / (M_SUN_SI * R_SUN_SI**2)
"""One solLum in solMass solRad2 yr-3."""
GRAVITATIONAL_TIME = G / ENERGY_PER_LUMINOSITY_YEAR
"""G Msun2 / (Rsun Lsun) in yr: the thermal time is this times m2/(R L)."""

# cgs values of the internal units, for laws published in cgs -----------------------------
G_PER_MSUN = M_SUN_SI * 1e3  # g
CM_PER_RSUN = R_SUN_SI * 1e2  # cm
S_PER_YEAR = YEAR_SI  # s
TORQUE_CGS = G_PER_MSUN * CM_PER_RSUN**2 / S_PER_YEAR**2
"""One solMass solRad2 yr-2 (the internal torque) in dyn cm."""
KM_S = R_SUN_SI / YEAR_SI / 1e3
"""One solRad per year in km s-1."""
HOURS_PER_YEAR = YEAR_SI / 3600.0
SECONDS_PER_YEAR = YEAR_SI
