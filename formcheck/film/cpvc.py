"""Critical pigment volume concentration from oil absorption: beyond it the binder no longer fills the film.

    CPVC = V_p / (V_p + V_oil),   V_p = sum m_i / rho_i,   V_oil = sum m_i OA_i / (100 rho_oil)

For a single pigment 1 / (1 + OA rho / 93.5) with linseed oil of 0.935 g/cm3. For a blend the oil each
pigment takes up adds. Oil absorption by the palette knife scatters by 10 % or more between hands, and a
latex film turns porous earlier than an oil film: a guide, never a limit.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike, NDArray

from formcheck.film.bounds import Bounded, quotient, reasons_for
from formcheck.film.volumes import refuse_outside

LINSEED_OIL_G_CM3 = 0.935
USUAL_RELATIVE_SD = 0.10  # of an oil absorption, common practice


def critical_pvc(pigment_mass: ArrayLike, *, density_g_cm3: ArrayLike, oil_absorption_g_100g: ArrayLike,
                 oil_absorption_sd: ArrayLike | None = None, names: Sequence[str]) -> Bounded:
    """CPVC of the pigment and extender blend of each recipe. (R,) [1]

    Parameters
    ----------
    pigment_mass : (R,P)
        Of the pigments and extenders, in any one unit.
    density_g_cm3, oil_absorption_g_100g : (P,)
        NaN where unknown: then the CPVC of recipes that hold the pigment is unknown. [g/cm3], [g/100 g]
    oil_absorption_sd : (P,), optional
        10 % of the value where not given or NaN. `low` and `high` stand two of them away. [g/100 g]
    names : P

    Raises
    ------
    ValueError
        Densities not above 0, negative oil absorption or mass.

    Source
    ------
    Asbeck & Van Loo, Ind. Eng. Chem. 41 (1949) 1470; oil absorption after ISO 787-5; Patton, Paint Flow
    and Pigment Dispersion (1979), for blends.
    """
    m, rho, oa = (np.asarray(v, float) for v in (pigment_mass, density_g_cm3, oil_absorption_g_100g))
    refuse_outside(m, "pigment_mass", 0, np.inf)
    refuse_outside(rho, "density_g_cm3", 1e-3, 100)
    refuse_outside(oa, "oil_absorption_g_100g", 0, 2000)
    sd = USUAL_RELATIVE_SD * oa
    if oil_absorption_sd is not None:
        given = np.asarray(oil_absorption_sd, float)
        sd = np.where(np.isnan(given), sd, given)
    pigment = _sum_present(m, 1 / rho)
    value, low, high = (_cpvc(pigment, _sum_present(m, np.maximum(x, 0.0) / 100) / LINSEED_OIL_G_CM3)
                        for x in (oa, oa + 2 * sd, oa - 2 * sd))
    missing = (m != 0) & (np.isnan(oa) | np.isnan(rho))
    return Bounded(value, low, high, reasons_for(
        missing, names, lambda which: f"no oil absorption or density of {which}"))


def reduced_pvc(pvc: Bounded, cpvc: Bounded) -> Bounded:
    """PVC / CPVC: above 1 the film is porous. (R,) [1]

    Beyond the critical for certain where `low` > 1, below it where `high` < 1, else it cannot be told.
    """
    return quotient(pvc, cpvc)


def _cpvc(pigment_volume: NDArray[np.float64], oil_volume: NDArray[np.float64]) -> NDArray[np.float64]:
    with np.errstate(divide="ignore", invalid="ignore"):
        return np.where(pigment_volume > 0, pigment_volume / (pigment_volume + oil_volume), np.nan)


def _sum_present(mass: NDArray[np.float64], per_mass: NDArray[np.float64]) -> NDArray[np.float64]:
    """Sum over pigments that are there: an unknown of an absent one does not matter. (R,P), (P,) to (R,)"""
    return np.where(mass == 0, 0.0, mass * per_mass).sum(axis=1)
