"""Signs of fluorescence: seen where emission is, silent on whites, tints, edges, greens (shapes: common practice)."""

import numpy as np
import pytest

from formcheck.spectra.fluorescence import fluorescence_signs

NM = np.arange(380.0, 731.0, 10.0)


def peak(at, width, height):
    return height * np.exp(-((NM - at) / width) ** 2)


def edge(at, width, low, high):
    return low + (high - low) / (1 + np.exp(-(NM - at) / width))


WHITENED = edge(405, 6, 0.3, 0.86) + peak(440, 18, 0.18)
DAYLIGHT_ORANGE = edge(580, 6, 0.05, 0.9) + peak(605, 15, 0.9)
HUMPED = edge(500, 7, 0.05, 0.75) + peak(525, 18, 0.2)


@pytest.mark.parametrize("reflectance, word", [
    (WHITENED, "brightener"), (DAYLIGHT_ORANGE, "above 1"), (HUMPED, "hump"),
])
def test_what_sends_out_light_is_told(reflectance, word):
    signs = fluorescence_signs(NM, reflectance)
    assert any(word in sign for sign in signs) and all("outside the model" in sign for sign in signs)


@pytest.mark.parametrize("reflectance", [
    np.full(NM.size, 0.95), edge(400, 5, 0.2, 0.93), edge(400, 5, 0.3, 0.8) + peak(425, 60, 0.05),
    edge(585, 8, 0.05, 0.85), 0.05 + peak(530, 40, 0.4), np.full(NM.size, 0.05),
    edge(400, 5, 0.2, 0.7) - peak(600, 60, 0.1),
], ids=["white tile", "titanium white", "pale blue tint", "orange", "green", "black", "tinted white"])
def test_what_only_absorbs_is_silent(reflectance):
    assert fluorescence_signs(NM, reflectance) == []
