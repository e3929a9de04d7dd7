"""How fast many pigmented films come out as Lab: against NumPy's bare minimum, and against colour-science.

    PYTHONPATH=. python benchmarks/film_kernel.py [FILMS]

Prints, from one run: seconds for FILMS five-colourant films on one ground (1,000,000 unless said), arrays
in, Lab out; the time NumPy takes for the two matrix products, one square root and one exponential alone
over the same sizes, in whole arrays and in pieces that fit the cache; the peak memory the films took
beyond their own arrays; and the time a loop of colour-science's sd_to_XYZ would take over the same
spectra, from a sample of 200. Fails above 4 times NumPy's time.
"""

from __future__ import annotations

import sys
import time
import tracemalloc
import warnings
from collections.abc import Callable

import numpy as np

from formcheck.colour.cielab import lab
from formcheck.colour.layer import layer_reflectance
from formcheck.colour.many_films import FILMS_AT_ONCE, lab_of_films
from formcheck.colour.tristimulus import white_point
from formcheck.spectra.grid import WAVELENGTH_NM

COLOURANTS, SAMPLE, THICKNESS_UM = 5, 200, 30.0
AT_MOST = 4.0  # times NumPy's bare minimum


def films(count: int) -> tuple[np.ndarray, np.ndarray, np.ndarray, np.ndarray]:
    """Loadings, K, S and ground drawn at random but smooth over wavelength."""
    rng = np.random.default_rng(2)
    knots = np.linspace(WAVELENGTH_NM[0], WAVELENGTH_NM[-1], 8)
    smooth = [np.interp(WAVELENGTH_NM, knots, row) for row in rng.random((2 * COLOURANTS, 8))]
    k, s = np.array(smooth[:COLOURANTS]), np.array(smooth[COLOURANTS:])
    loading = rng.dirichlet(np.ones(COLOURANTS), count) * 0.3
    return loading, 2 * k, s, np.full(len(WAVELENGTH_NM), 0.8)


def seconds(*works: Callable[[], object], times: int) -> list[float]:
    """The best of several rounds of each, side by side: one after the other in every round."""
    rounds = [[_once(work) for work in works] for _ in range(times)]
    return [min(column) for column in zip(*rounds, strict=True)]


def _once(work: Callable[[], object]) -> float:
    start = time.perf_counter()
    work()
    return time.perf_counter() - start


def bare_minimum(loading: np.ndarray, k: np.ndarray, s: np.ndarray) -> None:
    """The two products, one square root and one exponential pass."""
    K, S = loading @ k, loading @ s
    np.sqrt(K, out=K)
    np.exp(S, out=S)


def bare_minimum_in_pieces(loading: np.ndarray, k: np.ndarray, s: np.ndarray) -> None:
    for start in range(0, len(loading), FILMS_AT_ONCE):
        bare_minimum(loading[start : start + FILMS_AT_ONCE], k, s)


def peak_mb(work: Callable[[], object]) -> float:
    tracemalloc.start()
    work()
    peak = tracemalloc.get_traced_memory()[1]
    tracemalloc.stop()
    return peak / 1e6


def colour_science_loop(spectra: np.ndarray) -> tuple[float, np.ndarray]:
    """Seconds per spectrum of sd_to_XYZ, and the Lab it leads to."""
    import colour

    observer = colour.MSDS_CMFS["CIE 1964 10 Degree Standard Observer"]
    light = colour.SDS_ILLUMINANTS["D65"]
    distributions = [colour.SpectralDistribution(row, WAVELENGTH_NM) for row in spectra]
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        colour.sd_to_XYZ(distributions[0], observer, light)  # its caches are warm before the clock starts
        start = time.perf_counter()
        xyz = np.array([colour.sd_to_XYZ(distribution, observer, light) for distribution in distributions])
        took = time.perf_counter() - start
    return took / len(spectra), lab(xyz, white_point("D65", 10))


def main() -> int:
    count = int(sys.argv[1]) if len(sys.argv) > 1 else 1_000_000
    loading, k, s, ground = films(count)
    found = np.empty((0, 3))

    def ours() -> None:
        nonlocal found
        found = lab_of_films(loading, k=k, s=s, thickness_um=THICKNESS_UM, ground=ground)

    kernel, whole, pieces = seconds(
        ours, lambda: bare_minimum(loading, k, s), lambda: bare_minimum_in_pieces(loading, k, s), times=5
    )
    print(f"{count} films of {COLOURANTS} colourants to Lab: {kernel:.3f} s")
    print(f"NumPy's products, root and exponential alone: {whole:.3f} s; {kernel / whole:.1f} times longer")
    print(f"the same in pieces that fit the cache: {pieces:.3f} s; {kernel / pieces:.1f} times longer")
    print(f"peak memory: {peak_mb(ours):.0f} MB, of which the answer takes {found.nbytes / 1e6:.0f} MB")

    part = loading[:SAMPLE]
    spectra = layer_reflectance(ground=ground, k_x=part @ k * THICKNESS_UM, s_x=part @ s * THICKNESS_UM)
    each, expected = colour_science_loop(spectra)
    apart = float(np.abs(found[: len(expected)] - expected).max())
    print(f"a loop of colour-science's sd_to_XYZ: {each * count:.1f} s, {each * count / kernel:.0f} times longer")
    print(f"greatest difference from colour-science over {len(expected)} films: {apart:.1e}")
    return 0 if kernel <= AT_MOST * whole and apart < 1e-3 else 1


if __name__ == "__main__":
    sys.exit(main())
