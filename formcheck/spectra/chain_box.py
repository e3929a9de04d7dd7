"""A chain of conjugated atoms as a one-dimensional box.

E_n = n^2 h^2 / 8 m L^2; N electrons fill n = 1 to N/2. L runs past the end atoms by what the user takes
for the ends. Where single and double bonds alternate, V0 (1 - 1/N) is added to the gap.

Source: H. Kuhn, J. Chem. Phys. 17 (1949) 1198.
"""

from __future__ import annotations

import numpy as np

from formcheck.spectra.free_electron import H2_OVER_8M_EV_NM2, Orbitals, refuse_size

LEAST_NM, MOST_NM = 0.06, 0.6  # of chain for each pi electron; real ones lie near 0.14


def orbitals(n_pi_electrons: int, *, length_nm: float, empty: int = 12) -> Orbitals:
    """Orbitals n = 1, 2, ... of a chain, with `empty` ones above the filled.

    Raises
    ------
    InputError
        a length that no chain of so many electrons has.
    """
    if not LEAST_NM <= length_nm / n_pi_electrons <= MOST_NM:
        raise refuse_size(
            f"a chain of {length_nm:g} nm for {n_pi_electrons} pi electrons",
            f"{LEAST_NM * n_pi_electrons:.2g} to {MOST_NM * n_pi_electrons:.2g} nm",
        )
    n = np.arange(1, n_pi_electrons // 2 + empty + 1)
    return Orbitals(
        [f"n={i}" for i in n],
        H2_OVER_8M_EV_NM2 * n**2 / length_nm**2,
        transition_length(n, n, side_nm=length_nm) ** 2,
    )


def transition_length(n, m, *, side_nm: float):
    """x_nm = (8 L / pi^2) n m / (m^2 - n^2)^2 where n + m is odd, else 0; shape (n, m). [nm]"""
    n, m = np.asarray(n)[:, None], np.asarray(m)[None, :]
    odd = (n + m) % 2 == 1
    return np.where(odd, 8 * side_nm / np.pi**2 * n * m / np.where(odd, m**2 - n**2, 1) ** 2, 0.0)


def alternation_gap_ev(n_pi_electrons: int, *, bond_alternation_ev: float) -> float:
    """V0 (1 - 1/N), which single and double bonds in turn add to the gap. [eV]"""
    return bond_alternation_ev * (1 - 1 / n_pi_electrons)
