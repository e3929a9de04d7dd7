"""Absorption and scattering of pigment particles in a binder, from their refractive index and size.

Spheres of a log-normal spread of diameters, each scattering on its own (Mie 1908); coefficients for
Kubelka and Munk's two fluxes from the cross-sections (Mudgett & Richards 1971). Crowding at high
pigment volume, flakes, needles and metals lie outside this model.
"""

from __future__ import annotations

import numpy as np

from formcheck.trouble import InputError, Place, Problem

GEOMETRIC_SD = 1.4  # width of a well-ground pigment; see scripts/data/pigment_k_s.yaml for each one's own
SIZES_TO_A_POPULATION = 41
WIDTHS_EACH_WAY = 3.5
SMALLEST_UM, LARGEST_UM, WIDEST = 1e-3, 20.0, 2.5
POINTS_AT_ONCE = 1024  # bounds the memory: the recurrence keeps every term of these


def mie_k_s(
    *, wavelength_nm, index_n, index_k, median_diameter_um, geometric_sd=GEOMETRIC_SD, binder_index=1.5
):
    """K and S of a pigment, per um of pigment volume (a volume fraction phi gives phi K and phi S).

    K = 2 C_abs / V        S = (3/4) C_sca (1 - g) / V        [Mudgett & Richards 1971]
    averaged over a log-normal of diameters, each size weighing by its volume.

    Parameters
    ----------
    wavelength_nm : float array, shape (W,)
        in vacuum. [nm]
    index_n, index_k : float arrays, shape (W,)
        complex refractive index n - ik of the pigment.
    median_diameter_um : float or float array, shape (...)
        diameter that halves the pigment's volume (not its number). [um]
    geometric_sd : float
        spread of the log-normal: 1 for one size, about 1.3 to 1.7 for a pigment.
    binder_index : float or float array, shape (W,)
        refractive index of the binder around the particles, taken as clear.

    Returns
    -------
    K, S : float arrays, shape (..., W) [1/um]

    Raises
    ------
    InputError
        a size, spread or index outside what the model can treat; says which.

    Source
    ------
    G. Mie, Ann. Phys. 330 (1908) 377; P. S. Mudgett & L. W. Richards, Appl. Opt. 10 (1971) 1485.
    """
    wavelength_nm, index_n, index_k = np.broadcast_arrays(
        *(np.asarray(x, float) for x in (wavelength_nm, index_n, index_k))
    )
    median = np.asarray(median_diameter_um, float)
    _refuse_what_mie_cannot_treat(median, geometric_sd, index_n, index_k)
    diameter, weight = lognormal_by_volume(median, geometric_sd)
    binder = np.broadcast_to(np.asarray(binder_index, float), wavelength_nm.shape)
    size_parameter = np.pi * diameter[..., None] * binder / (wavelength_nm * 1e-3)
    q_ext, q_sca, g = mie_efficiencies((index_n - 1j * index_k) / binder, size_parameter)
    q_abs = np.where(index_k > 0, np.clip(q_ext - q_sca, 0, None), 0.0)
    # cross-section over volume of a sphere is (3/2) Q / d
    k_of_size = 2 * 1.5 * q_abs / diameter[..., None]
    s_of_size = 0.75 * 1.5 * q_sca * (1 - g) / diameter[..., None]
    return (np.einsum("s,...sw->...w", weight, k_of_size), np.einsum("s,...sw->...w", weight, s_of_size))


def lognormal_by_volume(median_diameter_um, geometric_sd):
    """Diameters (..., sizes) about each median, and the volume fraction (sizes,) that each stands for."""
    if geometric_sd == 1:
        return np.asarray(median_diameter_um, float)[..., None], np.ones(1)
    z = np.linspace(-WIDTHS_EACH_WAY, WIDTHS_EACH_WAY, SIZES_TO_A_POPULATION)
    weight = np.exp(-0.5 * z**2)
    diameter = np.asarray(median_diameter_um, float)[..., None] * np.exp(z * np.log(geometric_sd))
    return diameter, weight / weight.sum()


def volume_median_from_number_median(number_median_um, geometric_sd):
    """Hatch & Choate (1929): counting particles under the microscope gives a smaller median."""
    return number_median_um * np.exp(3 * np.log(geometric_sd) ** 2)


def mie_efficiencies(relative_index, size_parameter):
    """Extinction and scattering efficiency and mean cosine of scattering of a sphere.

    Parameters
    ----------
    relative_index : complex array, shape (...)
        m = (n - ik) of the particle over n of the medium; k at least 0.
    size_parameter : float array, shape (...), broadcasts with m
        x = pi d n_medium / wavelength.

    Returns
    -------
    q_ext, q_sca, g : float arrays of the broadcast shape

    Source
    ------
    Mie 1908 in the form of C. F. Bohren & D. R. Huffman, Absorption and Scattering of Light by Small
    Particles (1983), section 4.8: logarithmic derivative by downward recurrence, series cut at
    x + 4 x^(1/3) + 2 (Wiscombe 1980).
    """
    m, x = np.broadcast_arrays(np.asarray(relative_index, complex), np.asarray(size_parameter, float))
    shape, m, x = x.shape, m.ravel(), x.ravel()
    order = np.argsort(-x)  # largest first: as the order of the term grows, only a head of the arrays is left
    q_ext, q_sca, g = (np.empty(x.size) for _ in range(3))
    for some in np.array_split(order, max(1, -(-x.size // POINTS_AT_ONCE))):
        q_ext[some], q_sca[some], g[some] = _mie_largest_first(m[some], x[some])
    return q_ext.reshape(shape), q_sca.reshape(shape), g.reshape(shape)


def _mie_largest_first(m, x):
    last_term = np.floor(x + 4 * np.cbrt(x) + 2).astype(int)
    derivative = _log_derivatives(m * x, last_term[0])
    size = x
    ext, sca, gsca = (np.zeros(x.size) for _ in range(3))
    psi_before, psi = np.cos(x), np.sin(x)
    chi_before, chi = -np.sin(x), np.cos(x)
    a_before = b_before = np.zeros(x.size, complex)
    for n in range(1, last_term[0] + 1):
        live = int(np.searchsorted(-last_term, -n, side="right"))
        m, x = m[:live], x[:live]
        psi_before, psi = psi[:live], (2 * n - 1) / x * psi[:live] - psi_before[:live]
        chi_before, chi = chi[:live], (2 * n - 1) / x * chi[:live] - chi_before[:live]
        xi_before, xi = psi_before + 1j * chi_before, psi + 1j * chi
        electric = derivative[n, :live] / m + n / x
        magnetic = derivative[n, :live] * m + n / x
        a = (electric * psi - psi_before) / (electric * xi - xi_before)
        b = (magnetic * psi - psi_before) / (magnetic * xi - xi_before)
        ext[:live] += (2 * n + 1) * (a + b).real
        sca[:live] += (2 * n + 1) * (abs(a) ** 2 + abs(b) ** 2)
        a_before, b_before = a_before[:live], b_before[:live]
        gsca[:live] += (n - 1) * (n + 1) / n * (a_before * a.conj() + b_before * b.conj()).real + (
            2 * n + 1
        ) / (n * (n + 1)) * (a * b.conj()).real
        a_before, b_before = a, b
    return 2 / size**2 * ext, 2 / size**2 * sca, 2 * gsca / sca


def _log_derivatives(z, last_term):
    """D_n(z) = d ln psi_n / dz for n = 0 .. last_term, by downward recurrence; shape (n, points)."""
    far = abs(z).max()
    start = (
        int(max(last_term, far + 8 * np.cbrt(far))) + 16
    )  # wrong at first, right long before n falls to |z|
    kept = np.empty((last_term + 1, z.size), complex)
    derivative = np.zeros(z.size, complex)
    for n in range(start, 0, -1):
        derivative = n / z - 1 / (derivative + n / z)
        if n - 1 <= last_term:
            kept[n - 1] = derivative
    return kept


def _refuse_what_mie_cannot_treat(median_um, geometric_sd, index_n, index_k):
    def refuse(found, expected):
        raise InputError(Problem(Place("particles"), found, expected))

    if not (
        np.isfinite(median_um).all() and (median_um >= SMALLEST_UM).all() and (median_um <= LARGEST_UM).all()
    ):
        refuse(f"a median diameter of {median_um} um", f"{SMALLEST_UM:g} to {LARGEST_UM:g} um")
    if not 1 <= geometric_sd <= WIDEST:
        refuse(f"a geometric standard deviation of {geometric_sd}", f"1 (one size) to {WIDEST:g}")
    if not (np.isfinite(index_n).all() and (index_n > 0).all()):
        refuse("a refractive index n that is not above 0", "n above 0 at every wavelength")
    if not (np.isfinite(index_k).all() and (index_k >= 0).all()):
        refuse("an extinction index k below 0 or not a number", "k of 0 or more at every wavelength")
    if (index_k > index_n).any():
        refuse(
            "k above n, a metal", "a pigment that is not a metal: flakes and metals lie outside this model"
        )
