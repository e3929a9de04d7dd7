"""A ring of conjugated atoms as a circle that electrons run around.

E_k = hbar^2 k^2 / 2 m r^2 with k = 0, +-1, +-2 ... . Light changes k by one, and keeps the sense of going
round: of the four ways from +-q to +-(q+1), two are allowed, +q to +(q+1) and -q to -(q+1); the other two
(change of 2q+1) are the weak bands that only repulsion between electrons tells apart in energy.

Source: J. R. Platt, J. Chem. Phys. 17 (1949) 484.
"""

from __future__ import annotations

import numpy as np

from formcheck.spectra.free_electron import HBAR2_OVER_2M_EV_NM2, Orbitals, refuse_size

LEAST_NM, MOST_NM = 0.06, 0.6  # of circumference for each pi electron; real ones lie near 0.14


def orbitals(n_pi_electrons: int, *, circumference_nm: float, empty: int = 6) -> Orbitals:
    """Orbitals k = 0, +1, -1, +2, ... of a ring, with `empty` pairs above the filled.

    Raises
    ------
    InputError
        a circumference that no ring of so many electrons has.
    """
    if not LEAST_NM <= circumference_nm / n_pi_electrons <= MOST_NM:
        raise refuse_size(
            f"a ring {circumference_nm:g} nm around for {n_pi_electrons} pi electrons",
            f"{LEAST_NM * n_pi_electrons:.2g} to {MOST_NM * n_pi_electrons:.2g} nm",
        )
    most = n_pi_electrons // 4 + 1 + empty
    k = np.array([0, *(sign * i for i in range(1, most + 1) for sign in (1, -1))])
    radius = circumference_nm / (2 * np.pi)
    # <k+1| x |k> = r/2 and <k+1| y |k> = r/2i: together r^2/2
    one_step = np.abs(k[:, None] - k[None, :]) == 1
    return Orbitals(
        [f"k={i:+d}" if i else "k=0" for i in k],
        HBAR2_OVER_2M_EV_NM2 * k**2 / radius**2,
        np.where(one_step, radius**2 / 2, 0.0),
    )
