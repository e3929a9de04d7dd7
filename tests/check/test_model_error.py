"""The error a model showed in learning is carried to the prediction; the learned surface is used."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from formcheck.check.colourants import Colourants, PigmentOptics, learned_surface, model_error
from formcheck.check.model_error import model_error_covariance
from formcheck.check.predict import Setting, Variants, predict_spectrum
from formcheck.check.prediction_model import Optics
from formcheck.colour.difference import delta_e_2000
from formcheck.colour.saunderson import k1_from_index, k2_from_index
from formcheck.spectra.grid import WAVELENGTH_NM


@settings(max_examples=40, deadline=None)
@given(lightness=st.floats(8, 95), a=st.floats(-60, 60), b=st.floats(-60, 60), de00=st.floats(0.05, 1.0))
def test_shades_drawn_with_the_covariance_are_off_by_the_error(lightness, a, b, de00):
    shade = np.array([lightness, a, b])
    covariance = model_error_covariance(shade, de00)
    drawn = np.random.default_rng(3).multivariate_normal(np.zeros(3), covariance, size=3000)
    off = np.sqrt((delta_e_2000(shade, shade + drawn) ** 2).mean())
    assert off == pytest.approx(de00, rel=0.12)


def pigment(surface, error=None, name="blue"):
    flat = np.full(WAVELENGTH_NM.size, 1.0)
    return PigmentOptics(0, flat, flat, 0.1, 1.5, None, name, error, surface)


def test_a_surface_is_used_where_all_pigments_share_it():
    assert learned_surface(Colourants(pigments=[pigment((0.03, 0.5)), pigment((0.03, 0.5))])) == ((0.03, 0.5), [])
    assert learned_surface(Colourants(pigments=[pigment(None)])) == (None, [])
    constants, said = learned_surface(Colourants(pigments=[pigment((0.03, 0.5)), pigment(None)]))
    assert constants is None and "do not share one" in said[0]


def test_the_largest_error_counts():
    several = [pigment(None, 0.4), pigment(None, 1.2, "red"), pigment(None)]
    assert model_error(Colourants(pigments=several)) == (1.2, "red")
    assert model_error(Colourants(pigments=[pigment(None)])) == (0.0, "")


def test_constants_of_an_index_give_what_the_index_gives():
    w = WAVELENGTH_NM.size
    none = np.zeros((0, 3))
    optics = Optics(WAVELENGTH_NM, np.array([100.0, 500.0, 900.0]), np.zeros(0, int), np.zeros(0), none, none,
                    np.array([0]), np.array([1.5]), np.linspace(0.1, 4, w)[None, :], np.linspace(2, 0.5, w)[None, :])
    variants = Variants(np.array([[0.1]]), np.array([1.1]), np.ones((1, 0)), np.array([30.0]), np.ones((1, 0)),
                        np.zeros((1, 0)), np.zeros((1, 0)), np.ones((1, 1)), np.ones((1, 1)))
    for gloss in (True, False):
        by_index = Setting(ground=np.full(w, 0.8), film_index=1.5, specular_included=gloss)
        constants = (float(k1_from_index(1.5)), float(k2_from_index(1.5)))
        learned = replace(by_index, learned_surface=constants)
        assert predict_spectrum(optics, learned, variants) == pytest.approx(
            predict_spectrum(optics, by_index, variants), abs=1e-12)
