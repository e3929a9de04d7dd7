import numpy as np
import pytest

from formcheck.colour.cielab import lab_of_spectrum
from formcheck.colour.layer import layer_reflectance
from formcheck.colour.many_films import FILMS_AT_ONCE, FILMS_PER_THREAD, lab_of_films
from formcheck.spectra.grid import WAVELENGTH_NM


def some_films(count):
    rng = np.random.default_rng(4)
    n = len(WAVELENGTH_NM)
    loading = rng.dirichlet(np.ones(5), count) * 0.3
    loading[0] = 0  # a film without pigment
    return loading, rng.random((5, n)) * 3, rng.random((5, n)) * 0.5 * (rng.random((5, 1)) > 0.3)


@pytest.mark.parametrize("count", [1, 2, FILMS_AT_ONCE + 3])
def test_same_as_layer_by_layer(count):
    loading, k, s = some_films(count)
    X = np.linspace(5, 60, count)
    ground = np.linspace(0.3, 0.8, len(WAVELENGTH_NM))
    found = lab_of_films(loading, k=k, s=s, thickness_um=X, ground=ground, n=1.52, specular_included=True)
    spectra = layer_reflectance(
        ground=ground,
        k_x=(loading @ k) * X[:, None],
        s_x=(loading @ s) * X[:, None],
        n=1.52,
        specular_included=True,
    )
    np.testing.assert_allclose(found, lab_of_spectrum(spectra), atol=1e-8)


def test_a_film_alone_is_a_film_among_many():
    loading, k, s = some_films(300)
    several = lab_of_films(
        loading, k=k, s=s, thickness_um=20, ground=np.full(85, 0.8), light="A", observer_deg=2
    )
    alone = lab_of_films(
        loading[270:271], k=k, s=s, thickness_um=20, ground=np.full(85, 0.8), light="A", observer_deg=2
    )
    np.testing.assert_allclose(alone[0], several[270], atol=1e-10)


def test_other_grids():
    loading, k, s = some_films(3)
    every_other = slice(None, None, 2)
    found = lab_of_films(
        loading,
        k=k[:, every_other],
        s=s[:, every_other],
        thickness_um=20,
        ground=np.full(43, 0.8),
        wavelength_nm=WAVELENGTH_NM[every_other],
    )
    assert found.shape == (3, 3) and np.isfinite(found).all()


def test_no_films_give_no_shades():
    _, k, s = some_films(1)
    assert lab_of_films(np.zeros((0, 5)), k=k, s=s, thickness_um=20, ground=np.full(85, 0.8)).shape == (0, 3)


@pytest.mark.parametrize("name", ["volume_fraction", "k", "s", "thickness_um"])
def test_negative_figures_are_refused(name):
    loading, k, s = some_films(2)
    arguments = {"volume_fraction": loading, "k": k, "s": s, "thickness_um": np.array([1.0, 2.0])}
    arguments[name] = -np.ones_like(arguments[name])
    with pytest.raises(ValueError, match=name):
        lab_of_films(**arguments, ground=np.full(85, 0.8))


@pytest.mark.parametrize("included", [False, True])
def test_threads_change_nothing(included):
    loading, k, s = some_films(3 * FILMS_PER_THREAD + 5)
    ground = np.full(85, 0.8)
    one, three = (
        lab_of_films(loading, k=k, s=s, thickness_um=20, ground=ground, specular_included=included, threads=t)
        for t in (1, 3)
    )
    np.testing.assert_allclose(three, one, atol=1e-10)
    spectrum = layer_reflectance(
        ground=ground, k_x=loading[-1] @ k * 20, s_x=loading[-1] @ s * 20, specular_included=included
    )
    np.testing.assert_allclose(three[-1], lab_of_spectrum(spectrum), atol=1e-8)


def test_an_endless_film_is_refused():
    loading, k, s = some_films(2)
    with pytest.raises(ValueError, match="a finite thickness"):
        lab_of_films(loading, k=k, s=s, thickness_um=np.inf, ground=np.full(85, 0.8))
