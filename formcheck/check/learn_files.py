"""Learned colourants as material records: a YAML file and a table of figures beside it, for a shelf folder."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import yaml

from formcheck.check.record_learned import Learned, LearnedColourant, LearnedSpectrum
from formcheck.files_out import write_text
from formcheck.materials.record import Material
from formcheck.trouble import trouble

MEASURED = "ladder"  # key of the source in the records
DIGITS = 6
LEAST_SD, MOST_SD = 0.001, 4.9  # relative; what a record may say


def record_paths(out: Path, ids: list[str]) -> dict[str, Path]:
    """Where each colourant's record goes: the first to `out`, the others beside it, their ids in the name."""
    if out.suffix.lower() not in (".yaml", ".yml"):
        raise trouble(str(out), f"a file named {out.suffix or out.name!r}", "a record file: record.yaml")
    if not out.parent.is_dir():
        raise trouble(str(out), f"no folder {str(out.parent)!r}", "a record file in a folder that exists")
    return {one: out if n == 0 else out.with_name(f"{out.stem}_{one}{out.suffix}") for n, one in enumerate(ids)}


def write_colourant(path: Path, colourant: LearnedColourant, learned: Learned, *, density_g_cm3: float | None,
                    most_volume_fraction: float, source: dict[str, str]) -> None:
    """The record of one pigment, and its K and S. The figures are written first, so that no record lacks them."""
    figures = path.with_name(f"{path.stem}_k_s.csv")
    k_and_s: dict[str, Any] = {
        "file": figures.name, "relative_sd": round(float(np.clip(greater_sd(colourant), LEAST_SD, MOST_SD)), 4),
        "most_volume_fraction": round(min(most_volume_fraction, 1.0), 4)}
    if learned.model_error_de00 is not None:
        k_and_s["model_error_de00"] = round(learned.model_error_de00, 3)
    if learned.surface:
        k_and_s |= {"k1": round(learned.surface.k1, 4), "k2": round(learned.surface.k2, 4)}
    if not learned.thickness_known:
        k_and_s["thickness_known"] = False
    record: dict[str, Any] = {"id": colourant.id, "names": colourant.names, "kind": "pigment"}
    if density_g_cm3 is not None:
        record["density_g_cm3"] = {"value": density_g_cm3, "source": MEASURED}
    record["nonvolatile_fraction"] = {"value": 1.0, "source": MEASURED}  # it is what lies in the dry film
    record |= {"optical": {"k_and_s": {**k_and_s, "source": MEASURED}}, "sources": {MEASURED: source}}
    columns = (colourant.wavelength_nm, colourant.K_per_um, colourant.S_per_um, colourant.K_sd, colourant.S_sd)
    _write(figures, "wavelength_nm,K_per_um,S_per_um,K_sd,S_sd", columns)
    _write_record(path, record)


def write_dye(path: Path, dye: LearnedSpectrum, *, molar_mass_g_mol: float | None, source: dict[str, str]) -> None:
    """The record of one dye of a single form, and its absorptivity."""
    figures = path.with_name(f"{path.stem}_absorptivity.csv")
    values, sd = np.array(dye.absorptivity_l_g_cm), np.array(dye.sd)
    relative = float(np.median(sd[values >= 0.1 * values.max()] / values[values >= 0.1 * values.max()]))
    spectrum = {"file": figures.name, "column": "absorptivity_l_g_cm", "quantity": "absorptivity_l_g_cm",
                "relative_sd": round(min(max(relative, LEAST_SD), MOST_SD), 4), "source": MEASURED}
    record: dict[str, Any] = {"id": dye.id, "names": dye.names, "kind": "dye"}
    if molar_mass_g_mol is not None:
        record["molar_mass_g_mol"] = {"value": molar_mass_g_mol, "source": MEASURED}
    record |= {"optical": {"forms": [{"name": "as measured", "spectrum": spectrum}]}, "sources": {MEASURED: source}}
    _write(figures, "wavelength_nm,absorptivity_l_g_cm,sd", (dye.wavelength_nm, dye.absorptivity_l_g_cm, dye.sd))
    _write_record(path, record)


def greater_sd(colourant: LearnedColourant) -> float:
    """Relative sd of what the colourant does most: of K where it absorbs more than it scatters, else of S."""
    absorbs = np.median(colourant.K_per_um) > np.median(colourant.S_per_um)
    return colourant.K_relative_sd if absorbs else colourant.S_relative_sd


def _write(path: Path, heading: str, columns: tuple[list[float], ...]) -> None:
    rows = [",".join(f"{value:.{DIGITS}g}" for value in row) for row in zip(*columns, strict=True)]
    write_text(path, "\n".join([heading, *rows]) + "\n")


def _write_record(path: Path, record: dict[str, Any]) -> None:
    Material.model_validate(record)  # what no shelf would read is not written
    write_text(path, yaml.safe_dump(record, sort_keys=False, allow_unicode=True, width=120))
