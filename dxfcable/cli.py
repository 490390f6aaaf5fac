"""The command line: parse, call, print, exit."""

from __future__ import annotations

import gc
import os
import sys
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from dxfcable import __version__
from dxfcable.commands.plain import PlainCommand, PlainGroup

if TYPE_CHECKING:
    from dxfcable.errors import DxfcableError

app = typer.Typer(
    name="dxfcable",
    cls=PlainGroup,
    help="Solve cable roofs, footbridges and crossings on the drafter's own DXF.",
    no_args_is_help=True,
    pretty_exceptions_enable=False,
    rich_markup_mode=None,
    context_settings={"help_option_names": ["-h", "--help"]},
)

Drawings = Annotated[list[Path], typer.Argument(metavar="IN.dxf...", help="Drawings to work on.")]
Output = Annotated[
    Path | None, typer.Option("-o", "--output", help="Result; a folder for several drawings.")
]
InPlace = Annotated[bool, typer.Option("--in-place", help="Write into the drawing itself.")]
Backup = Annotated[bool, typer.Option("--backup", help="With --in-place: keep a copy beside it.")]
AsJson = Annotated[bool, typer.Option("--json", help="One JSON document on standard output.")]
Units = Annotated[
    str | None, typer.Option("--units", help="Drawing unit: in, ft, us-ft, mm, cm, dm or m.")
]
ForceUnit = Annotated[
    str | None, typer.Option("--force-unit", help="Unit of bare forces: lb, kip, N, kN, MN, kgf.")
]
SettingsFile = Annotated[
    Path | None, typer.Option("--settings", help="The office's page; else dxfcable.toml nearby.")
]
PlotScale = Annotated[
    str | None, typer.Option("--plot-scale", help='Such as 1:100 or 1/8"=1\'-0".')
]
Combos = Annotated[
    list[str] | None,
    typer.Option("--combo", help='Combination to check, as "1.2D + 1.6(L or S)"; repeatable.'),
]
Fresh = Annotated[
    bool, typer.Option("--fresh", help="Forget labels moved and texts edited by hand.")
]
LoadTable = Annotated[
    Path | None, typer.Option("--loads", help="Load table (CSV) that overrules the drawing.")
]
DryRun = Annotated[bool, typer.Option("--dry-run", help="Solve and print, write nothing.")]

_CAUTION = (
    "Exit codes: 0 done, 1 done and something that an engineer must see, 2 not done, "
    "3 a fault of dxfcable."
)


def _version(wanted: bool) -> None:
    """Print the version and stop."""
    if wanted:
        typer.echo(f"dxfcable {__version__}")
        raise typer.Exit


@app.callback(epilog=_CAUTION)
def _root(
    version: Annotated[
        bool, typer.Option("--version", callback=_version, is_eager=True, help="Print the version.")
    ] = False,
) -> None:
    """Solve cable roofs, footbridges and crossings on the drafter's own DXF.

    The drawing comes back with the cable, its force diagram and its labels on layers of their
    own; every other byte stays as it was. Results are to be checked and approved by a
    licensed engineer under the local code before use.
    """


@app.command(
    cls=PlainCommand,
    epilog="Examples: dxfcable starter office.dxf --units m; "
    "dxfcable starter office.dxf --units ft --settings dxfcable.toml",
)
def starter(
    output: Annotated[Path, typer.Argument(metavar="OUT.dxf", help="The drawing to write.")],
    units: Annotated[str, typer.Option("--units", help="Drawing unit: ft, in, m or mm.")],
    settings: Annotated[
        Path | None, typer.Option("--settings", help="Write the office's page here, with defaults.")
    ] = None,
    as_json: AsJson = False,
) -> None:
    """Write a starter drawing: layers, blocks, and one worked cable."""
    from dxfcable.commands.making import make_starter

    raise typer.Exit(make_starter(output, units, settings, as_json=as_json))


@app.command(
    cls=PlainCommand,
    epilog="Examples: dxfcable read roof.dxf; dxfcable read roof.dxf --loads loads.csv",
)
def read(
    drawings: Drawings,
    loads: Annotated[
        Path | None,
        typer.Option("--loads", help="Write the load table here, to fill and hand back."),
    ] = None,
    picture: Annotated[
        Path | None, typer.Option("--picture", help="Write an SVG: which text went to which point.")
    ] = None,
    units: Units = None,
    force_unit: ForceUnit = None,
    settings: SettingsFile = None,
    as_json: AsJson = False,
) -> None:
    """Show what is understood of a drawing, and what is wrong with it; the drawing stays."""
    from dxfcable.commands.reading import Extras, read_all
    from dxfcable.commands.running import Asked

    asked = Asked(units=units, force_unit=force_unit, settings=settings, as_json=as_json)
    raise typer.Exit(read_all(drawings, asked, Extras(loads=loads, picture=picture)))


@app.command(
    cls=PlainCommand,
    epilog="Examples: dxfcable solve roof.dxf -o solved.dxf; "
    "dxfcable solve bridge.dxf --in-place --backup --sag 6.5; "
    "dxfcable solve *.dxf -o solved/ --json",
)
def solve(
    drawings: Drawings,
    output: Output = None,
    in_place: InPlace = False,
    backup: Backup = False,
    dry_run: DryRun = False,
    max_tension: Annotated[str | None, typer.Option(help="Rule: largest tension anywhere.")] = None,
    sag: Annotated[str | None, typer.Option(help="Rule: greatest drop below the string.")] = None,
    low_point: Annotated[
        str | None, typer.Option(help="Rule: elevation of the lowest point.")
    ] = None,
    pull: Annotated[str | None, typer.Option(help="Rule: horizontal component.")] = None,
    length: Annotated[str | None, typer.Option(help="Rule: stretched length as formed.")] = None,
    cut_length: Annotated[str | None, typer.Option(help="Rule: unstressed length.")] = None,
    cable: Annotated[str | None, typer.Option(help="The cable that the rule is for.")] = None,
    under: Annotated[
        str | None, typer.Option(help='Combination to form under, as "D + L".')
    ] = None,
    loads: LoadTable = None,
    fresh: Fresh = False,
    combo: Combos = None,
    cut: Annotated[
        bool, typer.Option("--cut", help="The cables are cut: from now on lengths are kept.")
    ] = False,
    reform: Annotated[
        bool, typer.Option("--reform", help="Discard cables that are cut and form them anew.")
    ] = False,
    watch: Annotated[
        bool, typer.Option("--watch", help="Solve again at each save of the drawing.")
    ] = False,
    units: Units = None,
    force_unit: ForceUnit = None,
    plot_scale: PlotScale = None,
    settings: SettingsFile = None,
    as_json: AsJson = False,
) -> None:
    """Form each cable and write profile, force diagram and labels into the drawing."""
    from dxfcable.commands.running import Asked, Target
    from dxfcable.commands.solving import solve_all

    rules = {
        "max_tension": max_tension,
        "sag": sag,
        "low_point": low_point,
        "pull": pull,
        "length": length,
        "cut_length": cut_length,
    }
    asked = Asked(
        units=units,
        force_unit=force_unit,
        settings=settings,
        as_json=as_json,
        plot_scale=plot_scale,
        rules={name: text for name, text in rules.items() if text is not None},
        cable=cable,
        under=under,
        loads=loads,
        fresh=fresh,
        combos=tuple(combo or ()),
        cut=cut,
        reform=reform,
    )
    target = Target(output=output, in_place=in_place, backup=backup, dry_run=dry_run)
    if watch:
        from dxfcable.commands.watching import watch_all

        raise typer.Exit(watch_all(drawings, asked, target))
    raise typer.Exit(solve_all(drawings, asked, target))


@app.command(
    cls=PlainCommand,
    epilog="Examples: dxfcable revise issued.dxf --hold cut-length -o revised.dxf; "
    "dxfcable revise issued.dxf --hold rule --loads loads.csv -o revised.dxf; "
    'dxfcable revise issued.dxf --hold cut-length --delta-t "-30 K" --dry-run',
)
def revise(
    drawings: Drawings,
    hold: Annotated[
        str, typer.Option("--hold", help="rule: form anew; cut-length: keep unstressed lengths.")
    ],
    output: Output = None,
    in_place: InPlace = False,
    backup: Backup = False,
    dry_run: DryRun = False,
    loads: LoadTable = None,
    delta_t: Annotated[
        str | None, typer.Option("--delta-t", help='Change of temperature, as "30 K" or "-54 F".')
    ] = None,
    move_clamps: Annotated[
        bool, typer.Option("--move-clamps", help="Clamp load points where they are drawn now.")
    ] = False,
    combo: Combos = None,
    rev: Annotated[str, typer.Option("--rev", help="Number or letter of the revision.")] = "",
    description: Annotated[str, typer.Option(help="Revision row: what changed.")] = "",
    by: Annotated[str, typer.Option(help="Revision row: who drew it.")] = "",
    date: Annotated[str, typer.Option(help="Revision row: date.")] = "",
    fresh: Fresh = False,
    units: Units = None,
    force_unit: ForceUnit = None,
    plot_scale: PlotScale = None,
    settings: SettingsFile = None,
    as_json: AsJson = False,
) -> None:
    """Say what a load change moves, and write it into the issued drawing.

    Edit load texts in the issued drawing, or give a load table or a change of temperature. A
    cable not yet cut is formed anew; one that is cut keeps its lengths and its elevations move.
    """
    from dxfcable.asking import AskedRevision
    from dxfcable.commands.running import Asked, Target
    from dxfcable.commands.solving import revise_all

    asked = Asked(
        units=units,
        force_unit=force_unit,
        settings=settings,
        as_json=as_json,
        plot_scale=plot_scale,
        loads=loads,
        fresh=fresh,
        combos=tuple(combo or ()),
    )
    target = Target(output=output, in_place=in_place, backup=backup, dry_run=dry_run)
    wanted = AskedRevision(
        hold=hold,
        delta_t=delta_t,
        move_clamps=move_clamps,
        rev=rev,
        description=description,
        by=by,
        date=date,
    )
    raise typer.Exit(revise_all(drawings, asked, target, wanted))


@app.command(
    cls=PlainCommand,
    epilog="Examples: dxfcable schedule solved.dxf; "
    "dxfcable schedule *.dxf --csv schedules/ --json",
)
def schedule(
    drawings: Drawings,
    csv: Annotated[
        Path | None, typer.Option("--csv", help="Folder for three CSV files of each drawing.")
    ] = None,
    combo: Combos = None,
    units: Units = None,
    force_unit: ForceUnit = None,
    settings: SettingsFile = None,
    as_json: AsJson = False,
) -> None:
    """List cables, hangers and anchorages with their lengths and forces; the drawing stays.

    Cut lengths need the deductions of the settings' page, by end fitting or by mark.
    """
    from dxfcable.commands.running import Asked
    from dxfcable.commands.scheduling import schedule_all

    asked = Asked(
        units=units,
        force_unit=force_unit,
        settings=settings,
        as_json=as_json,
        combos=tuple(combo or ()),
    )
    raise typer.Exit(schedule_all(drawings, asked, csv))


@app.command(
    cls=PlainCommand,
    epilog="Examples: dxfcable sheets solved.dxf -d sheets; "
    "dxfcable sheets *.dxf -d sheets --size ARCH-D --together --checker",
)
def sheets(
    drawings: Drawings,
    folder: Annotated[Path, typer.Option("-d", "--directory", help="Folder for the sheets.")],
    together: Annotated[
        bool, typer.Option("--together", help="Several cables on a sheet where they fit.")
    ] = False,
    checker: Annotated[
        bool, typer.Option("--checker", help="Add a checker's page for each cable.")
    ] = False,
    size: Annotated[
        str | None, typer.Option("--size", help="A0 to A4, ANSI-A to -E, ARCH-A to -E1.")
    ] = None,
    loads: LoadTable = None,
    combo: Combos = None,
    units: Units = None,
    force_unit: ForceUnit = None,
    plot_scale: PlotScale = None,
    settings: SettingsFile = None,
    as_json: AsJson = False,
) -> None:
    """Make force-diagram sheets of each cable as DXF, PDF and SVG, and an index of the set.

    Elevation, force diagram, schedules, notes and title block at true paper size. Drawings
    stay as they are; one that is not solved is solved on the way.
    """
    from dxfcable.commands.running import Asked
    from dxfcable.commands.sheeting import SheetsAsked, sheets_all

    asked = Asked(
        units=units,
        force_unit=force_unit,
        settings=settings,
        as_json=as_json,
        plot_scale=plot_scale,
        loads=loads,
        combos=tuple(combo or ()),
    )
    wanted = SheetsAsked(folder=folder, together=together, checker=checker, size=size)
    raise typer.Exit(sheets_all(drawings, asked, wanted))


@app.command(
    cls=PlainCommand,
    epilog="Examples: dxfcable picture solved.dxf -o solved.pdf; "
    "dxfcable picture sheet.dxf -o sheet.png --layout A1",
)
def picture(
    drawing: Annotated[Path, typer.Argument(metavar="ANY.dxf", help="The drawing to picture.")],
    output: Annotated[Path, typer.Option("-o", "--output", help="A .svg, .png or .pdf file.")],
    layout: Annotated[
        str | None, typer.Option("--layout", help="A paper-space layout; else model space.")
    ] = None,
    size: Annotated[int, typer.Option("--size", help="Longer side of a PNG in pixels.")] = 1600,
    as_json: AsJson = False,
) -> None:
    """Make a picture of a drawing as it is drawn."""
    from dxfcable.commands.making import picture_one
    from dxfcable.commands.running import Asked

    asked = Asked(as_json=as_json)
    raise typer.Exit(picture_one(drawing, output, asked, layout=layout, size=size))


@app.command(cls=PlainCommand, epilog="Example: dxfcable strip solved.dxf -o original.dxf")
def strip(
    drawings: Drawings,
    output: Output = None,
    in_place: InPlace = False,
    backup: Backup = False,
    as_json: AsJson = False,
) -> None:
    """Take out all that dxfcable wrote: the drafter's file comes back byte for byte."""
    from dxfcable.commands.running import Asked, Target
    from dxfcable.commands.solving import strip_all

    target = Target(output=output, in_place=in_place, backup=backup, dry_run=False)
    raise typer.Exit(strip_all(drawings, Asked(as_json=as_json), target))


@app.command(
    cls=PlainCommand,
    epilog="Examples: dxfcable verify issued.dxf; dxfcable verify issued/*.dxf --json",
)
def verify(
    drawings: Drawings,
    units: Units = None,
    force_unit: ForceUnit = None,
    settings: SettingsFile = None,
    as_json: AsJson = False,
) -> None:
    """Prove issued drawings from their own geometry, and say if they are stale."""
    from dxfcable.commands.running import Asked
    from dxfcable.commands.verifying import verify_all

    asked = Asked(units=units, force_unit=force_unit, settings=settings, as_json=as_json)
    raise typer.Exit(verify_all(drawings, asked))


def _refuse_in_json(error: DxfcableError) -> None:
    """Write the document of a refusal, where one was asked for."""
    if "--json" in sys.argv:
        import json

        from dxfcable.reporting.report import error_finding, refused

        typer.echo(json.dumps(refused("", [error_finding(error)]), indent=1))


def main() -> None:
    """Run the command line; a fault of our own shows its traceback and exits 3."""
    from dxfcable.errors import DxfcableError

    # One drawing is a short run whose objects live to its end or are counted away: to look for
    # circles among them, while modules load, is a tenth of it. For several see `run_over`.
    gc.disable()
    # Nothing here is large enough to be shared out; threads cost time and memory at start.
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
    try:
        sys.exit(app(standalone_mode=False) or 0)
    except DxfcableError as error:
        from dxfcable.reporting.report import error_finding, sentence

        _refuse_in_json(error)
        typer.echo(sentence(error_finding(error)), err=True)
        sys.exit(2)
    except typer.Abort:
        typer.echo("ended", err=True)
        sys.exit(1)
    except Exception as error:
        show = getattr(error, "show", None)  # what was typed makes no command: typer says why
        if show is not None and hasattr(error, "exit_code"):
            show()
            told = getattr(error, "format_message", lambda: "")() or "no command"
            _refuse_in_json(DxfcableError(told, code="usage", remedy="See --help."))
            sys.exit(error.exit_code)
        import traceback

        traceback.print_exc()
        typer.echo("This is a fault of dxfcable; the drawing was not touched.", err=True)
        sys.exit(3)


if __name__ == "__main__":
    main()
