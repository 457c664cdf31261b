"""Arguments, streams and exit status; everything else is done elsewhere.

0: nothing at or above `--fail-on`, and everything was read. 1: findings. 2: wrong usage, settings
or rules, and nothing is written. 3: something was not read (1 wins over 3).
"""

from __future__ import annotations

import difflib
import os
import sys
import traceback
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from dataclasses import replace
from pathlib import Path
from typing import Any, NoReturn

import click
from rich.console import Console
from rich.progress import Progress

from dossiercheck import __version__, derive, pipeline, proposal, report, rulebook, rulepage
from dossiercheck import settings as settings_file
from dossiercheck.model import Grade, Review
from dossiercheck.names import ParserMissing
from dossiercheck.report import derivation
from dossiercheck.report.document import document
from dossiercheck.report.text import summary
from dossiercheck.settings import FORMATS, Settings
from dossiercheck.tomlfile import TomlError, suggestion

_WRONG_USAGE = 2
_INTERRUPTED = 130  # 128 + SIGINT, as shells have it


class _Word(click.ParamType[str]):
    """One word of a list; a mistyped one is answered with the word that was probably meant."""

    def __init__(self, name: str, words: Sequence[str]) -> None:
        self.name = name
        self.words = words

    def convert(self, value: Any, param: Any, ctx: Any) -> str:
        """The word, or an error that names a better one."""
        word = str(value).lower()
        if word not in self.words:
            self.fail(
                f"'{value}' is no {self.name}{suggestion(str(value), self.words)}", param, ctx
            )
        return word


class _Commands(click.Group):
    def resolve_command(self, ctx: click.Context, args: list[str]) -> Any:
        """As usual, but a path where a command belongs is answered with the command."""
        name = args[0]
        if self.get_command(ctx, name) is None and not name.startswith("-"):
            if Path(name).exists():
                hint = f"; to check it: dossiercheck check {name}"
            else:
                hint = suggestion(name, self.commands)
            ctx.fail(f"no command is called '{name}'{hint}")
        return super().resolve_command(ctx, args)


_GRADE = _Word("grade", tuple(Grade))
_FOLDER = click.Path(path_type=Path)
_with_rules = click.option(
    "--rules",
    "folders",
    metavar="DIR",
    multiple=True,
    type=_FOLDER,
    help="A folder of your own rules; one with the id of another replaces it. Repeatable.",
)
_with_settings = click.option(
    "--settings",
    "settings_path",
    metavar="FILE",
    type=_FOLDER,
    help="Settings file; else dossiercheck.toml in the first folder given.",
)


@click.group(cls=_Commands, context_settings={"help_option_names": ["-h", "--help"]})
@click.version_option(__version__, message="%(prog)s %(version)s")
def _commands() -> None:
    """Check that every drawing, name and stated chirality of a substance in a dossier agrees."""


@_commands.command("check")
@click.argument("paths", metavar="PATH...", nargs=-1, required=True, type=_FOLDER)
@click.option("--out", metavar="DIR", type=_FOLDER, help="Write the report's files here.")
@click.option(
    "--format",
    "formats",
    metavar="|".join(FORMATS),
    multiple=True,
    type=_Word("format", FORMATS),
    help="What to make; repeatable. [default: html and json with --out, else text]",
)
@click.option(
    "--fail-on",
    metavar="|".join(Grade),
    type=_GRADE,
    help="The lowest grade that gives exit status 1. [default: minor]",
)
@_with_rules
@_with_settings
@click.option("--jobs", metavar="N", type=click.IntRange(min=1), help="Workers. [default: 1]")
@click.option(
    "--propose-register",
    "register",
    metavar="FILE",
    type=_FOLDER,
    help="Write the substances as inferred to a new settings file, for you to correct.",
)
@click.option("--quiet", is_flag=True, help="No progress and no summary.")
def _check(
    paths: tuple[Path, ...],
    out: Path | None,
    formats: tuple[str, ...],
    fail_on: str | None,
    folders: tuple[Path, ...],
    settings_path: Path | None,
    jobs: int | None,
    register: Path | None,
    quiet: bool,
) -> int:
    """Check dossiers: files, or folders with all they hold.

    Exit status: 0 nothing found and everything read, 1 findings, 2 wrong usage, settings or
    rules, 3 something was not read.
    """
    _paths_exist(paths)
    found = settings_file.load(settings_path or settings_file.find(paths))
    formats = tuple(dict.fromkeys(formats)) or (found.formats if out else ("text",))
    _output_possible(out, formats, paths)
    if register is not None:
        _proposal_possible(register, paths)
    settings = replace(
        found,
        fail_on=Grade(fail_on) if fail_on else found.fail_on,
        jobs=jobs or found.jobs,
        formats=formats,
    )
    rules = rulebook.load(settings, folders)
    with _progress(quiet) as progress:
        review = pipeline.review(paths, settings, rules, progress=progress)
    if register is not None:
        _propose(review, register)
    made = document(review)
    files = tuple(name for name in formats if name != "text")
    if files and out is None:
        _print(report.format_of(files[0]).render(made))
        return exit_status(review, settings)
    if files and out is not None:
        try:
            report.write_document(made, out, files)
        except OSError as trouble:
            raise click.UsageError(f"cannot write to {out}: {trouble.strerror}") from trouble
    if not quiet:
        _print(summary(made).encode())
    return exit_status(review, settings)


@_commands.command("rules")
@click.argument("rule_id", metavar="[ID]", required=False)
@click.option(
    "--format",
    "form",
    metavar="text|json",
    type=_Word("format", ("text", "json")),
    default="text",
    help="[default: text]",
)
@_with_rules
@_with_settings
def _rules(
    rule_id: str | None, form: str, folders: tuple[Path, ...], settings_path: Path | None
) -> int:
    """Show the rule catalogue, or with an ID all that one rule says of itself."""
    rules = rulebook.load(settings_file.load(settings_path), folders).rules
    if rule_id is not None:
        ids = [rule.id for rule in rules]
        if rule_id not in ids:
            close = difflib.get_close_matches(rule_id, ids, n=1)
            hint = f"; did you mean '{close[0]}'?" if close else "; 'dossiercheck rules' lists all"
            raise click.UsageError(f"no rule is called '{rule_id}'{hint}")
        rules = tuple(rule for rule in rules if rule.id == rule_id)
    if form == "json":
        text = rulepage.as_json(rules)
    else:
        text = rulepage.page(rules[0]) if rule_id else rulepage.listing(rules)
    _print(text.encode())
    return 0


@_commands.command("derive")
@click.argument("given", metavar="STRUCTURE_OR_FILE")
@click.option(
    "--format",
    "form",
    metavar="|".join(derivation.FORMATS),
    type=_Word("format", derivation.FORMATS),
    default="text",
    help="[default: text]",
)
def _derive(given: str, form: str) -> int:
    """Show each stereodescriptor of a structure and how it follows from the sequence rules.

    Takes a SMILES, an InChI or a systematic name, a file of connection tables (.mol, .sdf) or of
    lines (.smi, .txt), or - for what comes on stdin. With json, one line a record.

    Exit status: 0 everything read, 2 nothing read, 3 some records of a file not read.
    """
    stdin = sys.stdin.buffer.read() if given == derive.STDIN else b""
    counted = derive.Counted()
    try:
        for piece in derivation.printed(counted.over(derive.answers(given, stdin)), form):
            _print(piece)
    except (derive.CannotRead, ParserMissing) as trouble:
        raise click.UsageError(str(trouble)) from trouble
    if counted.unread:
        click.echo(f"dossiercheck: {counted}", err=True)
    return 3 if counted.unread else 0


def exit_status(review: Review, settings: Settings) -> int:
    """What the result means for whoever called the program."""
    if any(finding.grade.gravity <= settings.fail_on.gravity for finding in review.findings):
        return 1
    return 3 if review.unread else 0


def run(arguments: Sequence[str] | None = None) -> int:
    """Run one command and return its exit status; mistakes become one line on stderr."""
    try:
        done = _commands.main(arguments, prog_name="dossiercheck", standalone_mode=False)
    except click.exceptions.NoArgsIsHelpError as trouble:
        click.echo(trouble.format_message(), err=True)
        return _WRONG_USAGE
    except click.ClickException as trouble:
        return _complain(trouble.format_message())
    except TomlError as trouble:
        return _complain(str(trouble))
    except (click.Abort, KeyboardInterrupt):
        return _INTERRUPTED
    except Exception as trouble:
        traceback.print_exc()
        return _complain(f"stopped by an error of its own: {type(trouble).__name__}: {trouble}")
    return int(done or 0)


def main() -> NoReturn:
    """The console script."""
    sys.exit(run())


def _complain(problem: str) -> int:
    click.echo(f"dossiercheck: {' '.join(problem.split())}", err=True)
    return _WRONG_USAGE


def _paths_exist(paths: Sequence[Path]) -> None:
    for path in paths:
        if not path.exists():
            beside = [entry.name for entry in path.parent.iterdir()] if path.parent.is_dir() else []
            close = difflib.get_close_matches(path.name, beside, n=1)
            hint = f"; did you mean '{path.parent / close[0]}'?" if close else ""
            raise click.UsageError(f"no such file or folder: {path}{hint}")


def _output_possible(out: Path | None, formats: Sequence[str], paths: Sequence[Path]) -> None:
    """Refuse before the work what would fail after it."""
    if out is None:
        if len(formats) > 1:
            raise click.UsageError("only one format can go to the screen; add --out DIR")
        return
    for path in paths:
        if out.resolve().is_relative_to(path.resolve()):
            raise click.UsageError(
                f"--out {out} lies inside the dossier {path}, where the next check would read"
                " the report as a part of it; choose another folder"
            )
    nearest = next(folder for folder in (out, *out.absolute().parents) if folder.exists())
    if not nearest.is_dir():
        raise click.UsageError(f"cannot write to {out}: {nearest} is not a folder")
    if not os.access(nearest, os.W_OK):
        raise click.UsageError(f"cannot write to {out}: no permission to write in {nearest}")


def _proposal_possible(register: Path, paths: Sequence[Path]) -> None:
    if register.exists():
        raise click.UsageError(f"{register} exists; a register is never overwritten")
    inside = any(register.resolve().is_relative_to(path.resolve()) for path in paths)
    if inside and register.name != settings_file.FILE_NAME:
        raise click.UsageError(
            f"{register} would be read as a part of the dossier; call it {settings_file.FILE_NAME}"
            " or put it elsewhere"
        )
    if not register.absolute().parent.is_dir():
        raise click.UsageError(f"there is no folder {register.parent}")


def _propose(review: Review, register: Path) -> None:
    """Write a new file whole; one that came to be in the meantime is left alone."""
    try:
        with register.open("x", encoding="utf-8") as file:
            file.write(proposal.proposed(review))
    except OSError as trouble:
        raise click.UsageError(f"cannot write {register}: {trouble.strerror}") from trouble


@contextmanager
def _progress(quiet: bool) -> Iterator[pipeline.Progress | None]:
    """A bar on stderr, only where a person watches."""
    if quiet or not sys.stderr.isatty():
        yield None
        return
    with Progress(console=Console(stderr=True), transient=True) as bars:
        tasks: dict[str, Any] = {}

        def show(stage: str, done: int, total: int) -> None:
            if stage not in tasks:
                tasks[stage] = bars.add_task(stage, total=total)
            bars.update(tasks[stage], completed=done, total=total)

        yield show


def _print(text: bytes) -> None:
    """To stdout as UTF-8; a reader that stops early (`| head`) is no error."""
    try:
        sys.stdout.buffer.write(text)
        sys.stdout.buffer.flush()
    except BrokenPipeError:
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
