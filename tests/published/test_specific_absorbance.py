"""Beer-Lambert: molar absorption of one author gives the specific absorbance of another's specification."""

import numpy as np
import pytest

from formcheck.colour.beer_lambert import absorbance, transmittance
from tests.published.colorimetry_values import VALUES

ROWS = VALUES["specific_absorbance"]["rows"]
BETWEEN_AUTHORS = 0.12  # the spread of these rows; a natural for a decadic coefficient would be 2.3 off


@pytest.mark.parametrize("row", ROWS, ids=lambda row: row[0])
def test_one_percent_in_one_centimetre(row):
    _, specific, molar_mass, epsilon = row[:4]
    found = absorbance([[epsilon]], [10.0 / molar_mass], 1.0)  # 1 % w/v is 10 g/L
    assert found[0] == pytest.approx(specific, rel=BETWEEN_AUTHORS)


def test_five_dyes_in_one_cell_add_up():
    epsilon = np.diag([row[3] for row in ROWS]).astype(float)
    concentration = 1e-5 / np.arange(1, 6)
    found = absorbance(epsilon, concentration, 0.5)
    np.testing.assert_allclose(found, [row[3] * c * 0.5 for row, c in zip(ROWS, concentration, strict=True)])
    np.testing.assert_allclose(-np.log10(transmittance(found)), found)
