import numpy as np
import pytest

from formcheck.colour.grounds import ground, ground_names, ground_record
from formcheck.colour.hiding import COMPLETE_HIDING, contrast_ratio
from formcheck.colour.layer import layer_reflectance
from formcheck.colour.tristimulus import xyz
from formcheck.spectra.grid import WAVELENGTH_NM


def test_contrast_ratio_of_measured_luminances():
    """ISO 6504-3: Y over black by Y over white."""
    np.testing.assert_allclose(
        contrast_ratio(y_black=[75.0, 78.4, 0.0], y_white=[80.0, 80.0, 0.0]), [0.9375, 0.98, np.nan]
    )
    assert COMPLETE_HIDING == 0.98


def test_white_film_of_known_scattering():
    """K = 0 (Kubelka 1948): R_b = SX/(1 + SX), R_w = (SX + (1 - SX) R_g)/(1 + SX - SX R_g)."""
    over = {}
    for name, R_g in (("black", 0.0), ("white", 0.8)):
        spectrum = layer_reflectance(
            ground=np.full(85, R_g), s_x=np.full(85, 4.0), n=1.0, ground_in_air=False
        )
        over[name] = xyz(spectrum)[1]
    by_hand = (4 / 5) / ((4 + (1 - 4) * 0.8) / (1 + 4 - 4 * 0.8))
    assert contrast_ratio(y_black=over["black"], y_white=over["white"]) == pytest.approx(by_hand, abs=1e-6)


@pytest.mark.parametrize("name", ground_names())
def test_every_ground_is_a_cited_reflectance(name):
    record = ground_record(name)
    assert 0 <= record.reflectance <= 1 and record.provenance.cite
    assert ground(name).shape == WAVELENGTH_NM.shape and (ground(name) == record.reflectance).all()
    assert ground(name, [400, 500, 600]).shape == (3,)


def test_chart_keeps_the_limits_of_astm_d2805():
    """D2805-96a: white at least 78 %, black at most 1 %."""
    assert ground_record("chart_white").reflectance >= 0.78
    assert ground_record("chart_black").reflectance <= 0.01
    assert ground_record("ideal_white").reflectance == 1 and ground_record("ideal_black").reflectance == 0


def test_unknown_ground_is_refused_with_a_suggestion():
    with pytest.raises(ValueError, match="did you mean 'chart_white'"):
        ground("chart white")
