"""Reflection of diffuse light at a smooth boundary, integrated from Fresnel's equations [Fresnel 1823]."""

from functools import cache

import numpy as np
from scipy.integrate import quad


@cache
def thrown_back(*, n_from, n_to):
    """Share of Lambertian light coming through n_from that a boundary to n_to reflects."""
    critical = np.arcsin(min(1.0, n_to / n_from))
    below, _ = quad(lambda angle: fresnel(angle, n_from, n_to) * np.sin(2 * angle), 0, critical, epsabs=1e-12)
    return below + np.cos(critical) ** 2


def fresnel(angle, n_from, n_to):
    """Of unpolarised light that comes at `angle` (radians) to the upright."""
    cosine = np.cos(angle)
    onward = np.sqrt(max(0.0, 1 - (n_from / n_to * np.sin(angle)) ** 2))
    across = (n_from * cosine - n_to * onward) / (n_from * cosine + n_to * onward)
    along = (n_to * cosine - n_from * onward) / (n_to * cosine + n_from * onward)
    return (across**2 + along**2) / 2
