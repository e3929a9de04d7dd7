"""The wavelength grid that spectra are brought to, and how they are brought there."""

from __future__ import annotations

import numpy as np

WAVELENGTH_NM = np.arange(360.0, 781.0, 5.0)
WAVELENGTH_NM.flags.writeable = False
