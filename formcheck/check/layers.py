"""The other films of a stack, from their own recipes: primer below, varnish above."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

from formcheck.check.acid import acid_state, form_shares
from formcheck.check.colourants import colourants_of
from formcheck.check.parts import parts_of
from formcheck.check.predict import Layer, dye_absorbance_per_cm, pigment_volume_fraction
from formcheck.check.prediction_model import prediction_model
from formcheck.check.setting import Viewing, viewing_of
from formcheck.check.shade import why_not
from formcheck.check.volumes import film_state
from formcheck.documents import path_text
from formcheck.recipe.batch import build_batch
from formcheck.recipe.read import WrittenRecipe, read_recipe
from formcheck.trouble import InputError, Problem

UM_PER_CM = 1e4


def with_layers(written: WrittenRecipe, viewing: Viewing, shelf_folder: Path | None = None) -> Viewing:
    """The film seen among those that its recipe puts under and over it.

    Raises
    ------
    InputError
        a file that is no recipe of a film, names films of its own, or whose optics are not known.
    """
    recipe = written.recipe
    if viewing.setting is None or not (recipe.under or recipe.over):
        return viewing
    if viewing.setting.ground is None:
        raise InputError(Problem(written.document.place(("under" if recipe.under else "over",)),
                                 "other films with a solution in a cell", "`film` and `ground` beside them"))
    under, over = (tuple(_layer(written, shelf_folder, field, n, name) for n, name in enumerate(names))
                   for field, names in (("under", recipe.under), ("over", recipe.over)))
    films = [*(f"over {name}" for name in reversed(recipe.under)), *(f"under {name}" for name in recipe.over)]
    return replace(viewing, setting=replace(viewing.setting, under=under, over=over),
                   geometry=", ".join([viewing.geometry, *films]),
                   notes=(*viewing.notes, "the uncertainty of the films under and over it"))


def _layer(written: WrittenRecipe, shelf_folder: Path | None, field: str, n: int, name: str) -> Layer:
    other = read_recipe(written.folder / name)

    def refuse(found: str, expected: str) -> InputError:
        return InputError(Problem(written.document.place((field, n)), f"{name}: {found}", expected,
                                  path_text((field, n))))

    if other.recipe.under or other.recipe.over:
        raise refuse("a recipe with films of its own under or over it", "each film of the stack named in this recipe")
    ground = other.recipe.ground or "ideal_white"  # any: the layer is reckoned without it
    other = replace(other, recipe=other.recipe.model_copy(update={"ground": ground}))
    batch = build_batch([other], shelf_folder=shelf_folder)
    parts = parts_of(batch.shelves[0], batch.materials)
    film = film_state(batch, parts, batch.shelves[0])
    acid = acid_state(batch, batch.shelves[0])
    viewing = viewing_of(other, parts, film)
    fractions = parts.fractions(batch.mass_fraction)[0]
    known = colourants_of(parts, ~(fractions == 0))
    shares = form_shares(parts, ~(fractions == 0), acid)
    reason = why_not(batch, film, viewing, known, shares, fractions, 0)
    if reason or viewing.setting is None or viewing.setting.ground is None:
        raise refuse(reason or "no film", "a recipe of a film whose shade can be told")
    model = prediction_model(batch, parts, film, acid, viewing, known, 0)
    variants = model.variants(model.inputs.value[None, :])
    volume = pigment_volume_fraction(model.optics, variants)
    um = viewing.wet_thickness_um
    return Layer((volume @ model.optics.k)[0] * um, (volume @ model.optics.s)[0] * um,
                 dye_absorbance_per_cm(model.optics, variants)[0] * um / UM_PER_CM, viewing.setting.film_index)
