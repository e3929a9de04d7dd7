"""Photons followed one by one through films on a Lambertian ground: the check of what two-flux theory claims.

Isotropic scattering, index 1 throughout, diffuse light from above, all light that comes back up counted.
"""

import numpy as np

DYING, SURVIVING = 0.02, 0.2  # a photon this weak goes on with this chance, the heavier for it


def reflected(absorption, scattering, *, ground, photons, seed=0):
    """(mean, standard error) of the reflected share of the light.

    absorption, scattering: sigma_a X and sigma_s X of each film, the upper one first.
    """
    rng = np.random.default_rng(seed)
    extinction = np.asarray(absorption, float) + np.asarray(scattering, float)
    floor = np.cumsum(extinction)  # depths are counted in mean free paths
    albedo = np.asarray(scattering, float) / extinction
    depth, out = np.zeros(photons), np.zeros(photons)
    cosine, weight, photon = _lambertian(rng, photons), np.ones(photons), np.arange(photons)
    while photon.size:
        depth = depth - cosine * np.log(rng.random(photon.size))
        up, down = depth < 0, depth > floor[-1]
        out[photon[up]] = weight[up]
        film = np.minimum(np.searchsorted(floor, depth), len(floor) - 1)
        weight = weight * np.where(down, ground, albedo[film])
        depth = np.minimum(depth, floor[-1])
        cosine = np.where(down, -_lambertian(rng, photon.size), 2 * rng.random(photon.size) - 1)
        weak = weight < DYING
        spared = rng.random(photon.size) < SURVIVING
        weight = np.where(weak, weight / SURVIVING, weight)
        goes_on = ~up & (spared | ~weak) & (weight > 0)
        depth, cosine, weight, photon = (row[goes_on] for row in (depth, cosine, weight, photon))
    return out.mean(), out.std() / np.sqrt(photons)


def _lambertian(rng, count):
    return np.sqrt(rng.random(count))
