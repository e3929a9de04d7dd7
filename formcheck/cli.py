"""The commands: read the words, call the rooms, show what came back, set the exit code. No science."""

import gc
import os
import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from datetime import date
from importlib import import_module
from io import TextIOWrapper
from pathlib import Path
from typing import Annotated

import typer

from formcheck import __version__
from formcheck.trouble import InputError, trouble

app = typer.Typer(add_completion=False, no_args_is_help=True, pretty_exceptions_enable=False,
                  rich_markup_mode=None, help="Check a recipe of ink, paint, stain or dye bath before weighing.")

NOTHING_HELD, HELD, UNUSABLE = 0, 1, 2

Files = Annotated[list[Path], typer.Argument(help="Recipe files: YAML, CSV or .xlsx.", show_default=False)]
AsOf = Annotated[str | None, typer.Option("--as-of", metavar="DATE", help="Use the rules in force on this day.")]
ShelfFolder = Annotated[Path | None, typer.Option("--shelf", help="A folder of your own material records.")]
RuleFolders = Annotated[list[Path] | None, typer.Option("--rules", help="A folder of further rules.")]
Lights = Annotated[list[str] | None, typer.Option("--light", help="A light, or a file of its power; again for each.")]
Json = Annotated[bool, typer.Option("--json", help="Print the whole record as JSON.")]
Page = Annotated[Path | None, typer.Option("--page", metavar="FILE", help="Write one self-contained page.")]


@app.command()
def check(files: Files, as_of: AsOf = None, shelf: ShelfFolder = None, rules: RuleFolders = None,
          json: Json = False, page: Page = None) -> None:
    """Predict the shade, judge loadings and company, and say what could not be told."""
    from formcheck.check.run import check_file

    day = _day(as_of)
    checks, troubles = [], []
    for file in files:
        try:
            checks.append(check_file(file, as_of=day, shelf_folder=shelf, rule_folders=rules or []))
        except InputError as error:
            troubles.append(error)
    if json:
        _print_json(checks, several=len(files) > 1)
    elif checks:
        from formcheck.report.terminal import show_checks

        show_checks(checks)
    if page and checks:
        from formcheck.files_out import write_text
        from formcheck.report.page import pages_html

        write_text(page, pages_html(checks))
        _say(f"wrote {page}")
    for trouble_met in troubles:
        _complain(trouble_met)
    if troubles:
        raise typer.Exit(UNUSABLE)
    raise typer.Exit(HELD if any(one.held for one in checks) else NOTHING_HELD)


@app.command()
def shade(
    file: Annotated[Path, typer.Argument(help="A recipe file.", show_default=False)],
    vary: Annotated[str | None, typer.Option(
        "--vary", metavar="INGREDIENT=FROM..TO", help="Run an amount through a row: 'blue paste=2..12 % w/w'.")] = None,
    steps: Annotated[int, typer.Option("--steps", help="How many amounts.")] = 11,
    ground: Annotated[list[str] | None, typer.Option(
        "--ground", help="A built-in ground, or a file of reflectance; again for each.")] = None,
    light: Lights = None,
    draws: Annotated[int, typer.Option("--draws", help="Uncertainty by so many draws.")] = 0,
    spectra: Annotated[Path | None, typer.Option(
        "--spectra", metavar="FILE", help="Write the predicted spectra as CSV or CxF3, by the name.")] = None,
    shelf: ShelfFolder = None, json: Json = False, page: Page = None,
) -> None:
    """The shade alone, as written or along a row of amounts, on several grounds and under several lights."""
    from formcheck.check.sweep import sweep_shades

    record = sweep_shades(file, vary=vary, steps=steps, grounds=ground or [], lights=light or [], draws=draws,
                          shelf_folder=shelf)
    _give(record, json=json, view="sweep.show_sweep", page=page, page_view="sweep_page.sweep_html")
    if spectra:
        from formcheck.check.sweep import write_swept_spectra

        write_swept_spectra(record, spectra, day=date.today())
        _say(f"wrote {spectra}")


@app.command()
def compare(
    standard: Annotated[Path, typer.Argument(help="Spectrum file of the standard.", show_default=False)],
    sample: Annotated[Path, typer.Argument(help="Spectrum file of the sample.", show_default=False)],
    white: Annotated[Path | None, typer.Option("--white", help="The bare reduction: strengths too.")] = None,
    light: Lights = None,
    observer: Annotated[int, typer.Option("--observer", help="2 or 10 degrees.")] = 10,
    of_standard: Annotated[str | None, typer.Option("--of-standard", help="Its column or sample, of several.")] = None,
    of_sample: Annotated[str | None, typer.Option("--of-sample", help="Its column or sample, of several.")] = None,
    scale: Annotated[str | None, typer.Option("--scale", help="percent or fraction, if no file says.")] = None,
    json: Json = False, page: Page = None,
) -> None:
    """Two measured spectra against each other: differences in words, metamerism, match, strength."""
    from formcheck.check.compare import compare_spectra

    if scale not in (None, "percent", "fraction"):
        raise trouble("--scale", repr(scale), "percent or fraction")
    record = compare_spectra(standard, sample, white=white, lights=light or [], observer_deg=observer,
                             columns=(of_standard, of_sample), scale=scale)  # type: ignore[arg-type]
    _give(record, json=json, view="compare.show_comparison", page=page, page_view="compare.comparison_html")


@app.command()
def estimate(
    box: Annotated[list[str] | None, typer.Option(
        "--box", metavar="WORDS", help="A box: 'chain 8 1.2 nm', 'plate 14 0.9 x 0.5 nm', 'ring 6 0.84 nm' "
        "(pi electrons, then size); again for each box of the molecule.")] = None,
    file: Annotated[Path | None, typer.Argument(help="A file of boxes, by form.", show_default=False)] = None,
    json: Json = False, page: Page = None,
) -> None:
    """Levels, bands, spectrum and swatch of a dye described as electron boxes."""
    from formcheck.check.estimate import estimate_boxes

    record = estimate_boxes(box or [], file)
    _give(record, json=json, view="estimate.show_estimate", page=page, page_view="estimate.estimate_html")


@app.command()
def learn(
    file: Annotated[Path, typer.Argument(help="A file of measured drawdowns, or of a dilution series.",
                                         show_default=False)],
    out: Annotated[Path | None, typer.Option("--out", metavar="FILE",
                                             help="Write the material record here, others beside it.")] = None,
    shelf: ShelfFolder = None, json: Json = False, page: Page = None,
) -> None:
    """From measured drawdowns or solutions to a material record, and how far off it tends to be."""
    from formcheck.check.learn import learn_file

    with _progress_bar() as told:
        record = learn_file(file, out=out, shelf_folder=shelf, progress=told)
    _give(record, json=json, view="learned.show_learned", page=page, page_view="learned_page.learned_html")


@app.command()
def shelf(
    words: Annotated[list[str] | None, typer.Argument(help="Part of a name, a kind, a CAS or CI number.",
                                                         show_default=False)] = None,
    folder: ShelfFolder = None,
) -> None:
    """List the materials formcheck knows; one match is shown whole, each datum with its source."""
    from formcheck.report.shelf import show_shelf

    show_shelf(" ".join(words or []), folder)


@app.command()
def why(rule: Annotated[str, typer.Argument(help="The id of a rule.", show_default=False)],
        rules: RuleFolders = None, as_of: AsOf = None) -> None:
    """Show a rule whole: what it asks, of whom, since when, by which text, with its examples."""
    from formcheck.check.rules import find_rule
    from formcheck.report.rule import show_rule

    show_rule(find_rule(rule, rules or []).rule, as_of=_day(as_of))


@app.command()
def schema(check: Annotated[bool, typer.Option("--check", help="The schema of a Check instead.")] = False) -> None:
    """Print the JSON Schema of a recipe file, for editors that complete and check it."""
    import json as json_module

    if check:
        from formcheck.check.record import Check

        described = Check.model_json_schema()
    else:
        from formcheck.recipe.schema import recipe_json_schema

        described = recipe_json_schema()
    _print_utf_8(json_module.dumps(described, indent=1, ensure_ascii=False))


@app.command()
def start(folder: Annotated[Path, typer.Argument(help="A folder that does not exist yet.")]) -> None:
    """Lay out the demo workshop to begin from."""
    from formcheck.check.start import lay_out_workshop

    first = lay_out_workshop(folder)
    _say(f"laid out {folder}; try: formcheck check {first}")


@app.callback(invoke_without_command=True)
def about(version: Annotated[bool, typer.Option("--version", help="Print the version.")] = False) -> None:
    if version:
        print(f"formcheck {__version__}")
        raise typer.Exit()


def main() -> None:
    """Every mistake of the user ends as a message and exit code 2."""
    gc.disable()  # a command lives for a second: collecting garbage meanwhile costs a tenth of it
    os.environ.setdefault("PYDANTIC_DISABLE_PLUGINS", "__all__")  # looking for plugins costs more than reading a recipe
    try:
        app()
    except InputError as error:
        _complain(error)
        raise SystemExit(UNUSABLE) from None
    except BrokenPipeError:  # `formcheck shelf | head`
        sys.stderr.close()
        raise SystemExit(NOTHING_HELD) from None
    except OSError as error:  # a full disk behind `> file`
        _say(f"formcheck cannot write its output: {error.strerror or error}")
        raise SystemExit(UNUSABLE) from None


def run() -> None:
    """The console entry: `main`, then out at once: nothing is left to close, and unloading takes its time."""
    code: object = NOTHING_HELD
    try:
        main()
    except SystemExit as left:
        code = left.code
    try:
        sys.stdout.flush()
        sys.stderr.flush()
    except (BrokenPipeError, ValueError):
        pass
    os._exit(code if isinstance(code, int) else NOTHING_HELD if code is None else UNUSABLE)


def _day(text: str | None) -> date:
    """The day to judge by; the clock is asked here and nowhere else."""
    if text is None:
        return date.today()
    try:
        return date.fromisoformat(text)
    except ValueError:
        raise trouble("--as-of", repr(text[:40]), "a date such as 2026-12-01") from None


def _give(record, *, json: bool, view: str, page: Path | None, page_view: str) -> None:
    """Print a record as JSON or by its view, and write its page; views are `module.function` of report/."""
    if json:
        _print_utf_8(record.model_dump_json(indent=1))
    else:
        _view(view)(record)
    if page:
        from formcheck.files_out import write_text

        write_text(page, _view(page_view)(record))
        _say(f"wrote {page}")


def _view(name: str):
    """A function of report/, imported when it is asked for: the others' rooms stay closed."""
    module, _, function = name.partition(".")
    return getattr(import_module(f"formcheck.report.{module}"), function)


def _print_json(checks, *, several: bool) -> None:
    """One object for one file; for several a list, however many of them could be used."""
    texts = [one.model_dump_json(indent=1) for one in checks]
    if several:
        _print_utf_8("[" + ",\n".join(texts) + "]")
    elif texts:
        _print_utf_8(texts[0])


def _print_utf_8(text: str) -> None:
    """JSON is UTF-8, whatever the terminal speaks."""
    if isinstance(sys.stdout, TextIOWrapper):
        sys.stdout.reconfigure(encoding="utf-8")
    print(text)


def _complain(error: InputError) -> None:
    print(f"formcheck cannot use this input:\n{error}", file=sys.stderr)


@contextmanager
def _progress_bar() -> Iterator[Callable[[str, int, int], None]]:
    """A bar on standard error for what takes a while; nothing where nobody watches."""
    from rich.console import Console
    from rich.progress import Progress

    with Progress(console=Console(stderr=True), transient=True, disable=not sys.stderr.isatty()) as bar:
        task = bar.add_task("", total=None)
        yield lambda what, done, of: bar.update(task, description=what, completed=done, total=of)


def _say(text: str) -> None:
    print(text, file=sys.stderr)
