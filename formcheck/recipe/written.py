"""Amounts, lengths and purities as a maker writes them: text with its unit, checked when the file is read."""

from __future__ import annotations

from typing import Annotated, Any

from pydantic import BeforeValidator, Field

from formcheck.strict import wrong
from formcheck.trouble import shown
from formcheck.units import UnitKind, parse_amount

LONGEST = 80  # characters; also keeps the pattern that reads an amount quick on hostile text
INGREDIENT_KINDS: tuple[UnitKind, ...] = (
    "mass", "volume", "mass_fraction", "volume_fraction", "parts", "mass_per_volume", "rest")


def read_amount(value: Any, *kinds: UnitKind, example: str, above_zero: bool = False) -> Any:
    """Text that `units.parse_amount` reads, unchanged; what is not text is left to the type check.

    Raises
    ------
    PydanticCustomError
        a bare number, an unknown unit, a decimal comma, a negative or absurd number, text too long.
    """
    if isinstance(value, int | float) and not isinstance(value, bool):
        raise wrong(f"{shown(value)} without a unit", f"a number and its unit, such as {example!r}")
    if not isinstance(value, str):
        return value
    if len(value) > LONGEST:
        raise wrong(shown(value), f"a number and its unit, such as {example!r}")
    try:
        amount = parse_amount(value, *kinds)
    except ValueError as error:
        if "," in value:
            raise wrong(shown(value), "a decimal point and no thousands mark, such as '2.5 g'") from None
        found, _, expected = str(error).rpartition("|")
        raise wrong(found, expected) from None
    if above_zero and amount.value <= 0:
        raise wrong(shown(value), f"more than nothing, such as {example!r}")
    return value


def _reader(*kinds: UnitKind, example: str, above_zero: bool = False) -> BeforeValidator:
    return BeforeValidator(
        lambda value: read_amount(value, *kinds, example=example, above_zero=above_zero))


AmountText = Annotated[
    str, _reader(*INGREDIENT_KINDS, example="300 g"),
    Field(examples=["300 g", "5 % w/w", "20 % v/v", "10 parts", "3 g/L", "250 mL", "to make up"])]
BatchText = Annotated[
    str, _reader("mass", "volume", example="1 kg", above_zero=True), Field(examples=["1 kg", "500 mL"])]
MassText = Annotated[str, _reader("mass", example="0.01 g", above_zero=True), Field(examples=["0.01 g"])]
LengthText = Annotated[
    str, _reader("length", example="30 um", above_zero=True), Field(examples=["30 um", "10 mm"])]


def _purity(value: Any) -> Any:
    value = read_amount(value, "mass_fraction", example="92 %", above_zero=True)
    if isinstance(value, str) and fraction(value) > 1:
        raise wrong(shown(value), "at most 100 %")
    return value


PurityText = Annotated[str, BeforeValidator(_purity), Field(examples=["92 %"])]


def fraction(text: str) -> float:
    """`"92 %"` as 0.92."""
    return parse_amount(text, "mass_fraction").value


def length_um(text: str) -> float:
    """`"10 mm"` as 10 000 um."""
    return parse_amount(text, "length").value


def mass_g(text: str) -> float:
    """`"10 mg"` as 0.01 g."""
    return parse_amount(text, "mass").value
