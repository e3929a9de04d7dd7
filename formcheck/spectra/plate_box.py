"""A flat conjugated molecule as a rectangular plate.

E = (h^2/8m) (n_x^2/a^2 + n_y^2/b^2), filled in order of energy. Light along one side changes the quantum
number of that side by an odd number and leaves the other.

Source: two-dimensional free-electron model; textbook cases in tests/published/test_boxes_published.py.
"""

from __future__ import annotations

import numpy as np

from formcheck.spectra.chain_box import transition_length
from formcheck.spectra.free_electron import (
    H2_OVER_8M_EV_NM2,
    MOST_ORBITALS_EACH_WAY,
    Orbitals,
    refuse_size,
)

LEAST_NM2, MOST_NM2 = 0.006, 0.3  # of plate for each pi electron; real ones lie near 0.03 to 0.05
MOST_LOPSIDED = 20.0


def orbitals(n_pi_electrons: int, *, sides_nm) -> Orbitals:
    """Orbitals (n_x, n_y) of a plate in order of energy.

    Raises
    ------
    InputError
        sides that no molecule of so many electrons has.
    """
    a, b = sides_nm
    if not LEAST_NM2 <= a * b / n_pi_electrons <= MOST_NM2 or max(a, b) > MOST_LOPSIDED * min(a, b):
        raise refuse_size(
            f"a plate of {a:g} x {b:g} nm for {n_pi_electrons} pi electrons",
            f"{LEAST_NM2:g} to {MOST_NM2:g} nm2 for each electron, sides at most {MOST_LOPSIDED:g} to 1",
        )
    most = n_pi_electrons // 2 + 8
    nx, ny = (
        grid.ravel() for grid in np.meshgrid(np.arange(1, most + 1), np.arange(1, most + 1), indexing="ij")
    )
    energy = H2_OVER_8M_EV_NM2 * (nx**2 / a**2 + ny**2 / b**2)
    kept = np.argsort(energy, kind="stable")[: n_pi_electrons // 2 + MOST_ORBITALS_EACH_WAY]
    # orbitals above the least energy that the grid leaves out would not be all of their kind
    whole = H2_OVER_8M_EV_NM2 * min((most + 1) ** 2 / a**2 + 1 / b**2, 1 / a**2 + (most + 1) ** 2 / b**2)
    kept = kept[energy[kept] < whole]
    nx, ny = nx[kept], ny[kept]
    along_a = transition_length(nx, nx, side_nm=a) ** 2 * (ny[:, None] == ny[None, :])
    along_b = transition_length(ny, ny, side_nm=b) ** 2 * (nx[:, None] == nx[None, :])
    return Orbitals([f"({i},{j})" for i, j in zip(nx, ny, strict=True)], energy[kept], along_a + along_b)
