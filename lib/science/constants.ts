/** Physical constants that more than one model needs. Each is written here once. */

/** 0 °C in kelvin, exact by definition. */
export const ZERO_CELSIUS_K = 273.15

/** Molar gas constant, J/(mol·K); exact since the SI of 2019 (CODATA 2018), to ten figures. */
export const GAS_CONSTANT_J_PER_MOL_K = 8.314462618

/** Stefan–Boltzmann constant, W/(m²·K⁴) (CODATA 2018). */
export const STEFAN_BOLTZMANN_W_PER_M2K4 = 5.670374419e-8

/** Heat that water takes to leave the wood near 100 °C, J/kg (SCIENCE §3; steam tables give 2.257 MJ/kg at 100 °C). */
export const LATENT_HEAT_J_PER_KG = 2.26e6
