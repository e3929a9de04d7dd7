"""Random mixtures, shelf records in small, and the same chemistry by another route, for these tests."""

from __future__ import annotations

import numpy as np
from hypothesis import strategies as st
from scipy.optimize import brentq

from formcheck.acid_base import activity, water
from formcheck.materials.record import Material

SOURCES = {"s": {"cite": "this test", "kind": "invented_demo"}}


def number(value):
    return {"value": float(value), "source": "s"}


def material(name, kind="additive", *, pka=None, molar_mass=None, solubility=None, **fields):
    """A record; keyword fields beyond the named go into `acid_base`, which is absent when there are none."""
    record = {"id": name.lower().replace(" ", "_"), "names": [name], "kind": kind, "sources": SOURCES}
    form = fields.pop("physical_form", None)
    if pka is not None or fields:
        record["acid_base"] = {**fields, "pka": [number(p) for p in pka or []]}
    if molar_mass is not None:
        record["molar_mass_g_mol"] = number(molar_mass)
    if solubility is not None:
        record["solubility_water_g_l"] = number(solubility)
    if form is not None:
        record["physical_form"] = form
    return Material.model_validate(record)


WATER = material("Water", "water")
ACETIC = material("Acetic acid", "acid", pka=[4.756], molar_mass=60.052, physical_form="liquid")
SODA = material("Soda ash", "base", pka=[6.352, 10.329], counter_charge=2, molar_mass=105.988)
SALT = material("Common salt", "salt", charge_fully_protonated=-1, counter_charge=1, molar_mass=58.443)
ETHANOL = material("Ethanol", "solvent", neutral=True, molar_mass=46.07)
TITANIA = material("Rutile", "pigment", neutral=True)
LATEX = material("Acrylic latex", "binder", buffers_unknowably=True)
UNSAID = material("Basic dye", "dye", molar_mass=400.0)

substance = st.tuples(
    st.one_of(st.just(0.0), st.floats(1e-6, 1.0)),
    st.lists(st.floats(-1, 14), max_size=3).map(sorted),
    st.integers(-2, 3), st.integers(-2, 2))
substances = st.lists(substance, max_size=5)


def tables(rows):
    """total (1,S), pka (S,n), charge (S,), counter (S,) of a list of substances."""
    n = max((len(pka) for _, pka, *_ in rows), default=0)
    pka = np.full((len(rows), n), np.nan)
    for row, (_, steps, *_) in zip(pka, rows, strict=True):
        row[:len(steps)] = steps
    return (np.array([[c for c, *_ in rows]]), pka,
            np.array([z for _, _, z, _ in rows], float), np.array([z for *_, z in rows], float))


def concentrations(rows, *, hydrogen, pkw, log_gamma_1):
    """Every ion as (mol/kg, charge), from mass action laws taken one proton at a time.

    log gamma = z^2 log_gamma_1.
    """
    def gamma(z):
        return 10 ** (z * z * log_gamma_1)
    ions = [(hydrogen, 1), (10**-pkw / (hydrogen * gamma(1)) / gamma(1), -1)]
    for c, steps, z0, counter in rows:
        amounts = [1.0]
        for i, pka in enumerate(steps):
            z = z0 - i
            amounts.append(amounts[-1] * 10**-pka * gamma(z) / (hydrogen * gamma(1) * gamma(z - 1)))
        ions += [(c * amount / sum(amounts), z0 - i) for i, amount in enumerate(amounts)]
        ions += [(c * abs(counter), int(np.sign(counter)))]
    return ions


def ph_by_brentq(rows, *, pkw=None, ideal=False):
    """-log10 a(H+) by scipy's root finder on [H+], one mixture, fixed point on the ionic strength."""
    pkw = float(water.pkw(25.0)) if pkw is None else pkw
    log_gamma_1 = 0.0
    for _ in range(200):
        def net(log_h, g=log_gamma_1):
            return sum(c * z for c, z in concentrations(rows, hydrogen=10**log_h, pkw=pkw, log_gamma_1=g))
        log_h = brentq(net, -18, 4, xtol=1e-14)
        ions = concentrations(rows, hydrogen=10**log_h, pkw=pkw, log_gamma_1=log_gamma_1)
        strength = min(sum(c * z * z for c, z in ions) / 2, 0.5)
        a = float(activity.debye_hueckel_a(25.0))
        new = 0.0 if ideal else -a * (strength**0.5 / (1 + strength**0.5) - 0.3 * strength)
        if abs(new - log_gamma_1) < 1e-13:
            break
        log_gamma_1 = new
    return -log_h - log_gamma_1
