"""The command line: every command is loaded only when it is asked for."""

from __future__ import annotations

import difflib
import importlib
import json
import sys
import traceback
from collections.abc import Sequence

import click

from advisor.errors import AdvisorError, Fault, FaultyInput

# Name of a command (module and function of advisor.cli) and what it answers.
COMMANDS = {
    "setpoints": "What to run now: low, target and high at every point, and why.",
    "ahead": "What comes: a load, a change, a silo overnight, a tank at rest, the day.",
    "what-if": "The same job run another way: fuel and money against margin.",
    "review": "Where, when and why the plant ran over or under, and what it cost.",
    "dashboard": "The pages for operator, QC and manager, in a browser.",
    "binder": "From laboratory readings to viscosity, window and doubt.",
    "records": "Dated facts: bring in, write out, look up as of any moment.",
    "check": "Whether a plant folder is sound, with everything that is wrong.",
}


class Commands(click.Group):
    """The group whose commands are modules, imported one at a time."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        """Names of the commands, in the order of use."""
        return list(COMMANDS)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        """The command called ``cmd_name``, or None."""
        if cmd_name not in COMMANDS:
            return None
        word = cmd_name.replace("-", "_")
        command = getattr(importlib.import_module(f"advisor.cli.{word}"), word)
        return command if isinstance(command, click.Command) else None

    def resolve_command(
        self, ctx: click.Context, args: list[str]
    ) -> tuple[str | None, click.Command | None, list[str]]:
        """The command ``args`` begin with; a word that is none is refused with the nearest."""
        word = args[0]
        if word not in COMMANDS and not word.startswith("-"):
            near = difflib.get_close_matches(word, COMMANDS, n=1)
            meant = f"Did you mean '{near[0]}'? " if near else ""
            ctx.fail(f"'{word}' is no command. {meant}Known here: {', '.join(COMMANDS)}.")
        return super().resolve_command(ctx, args)

    def format_commands(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """Write what each command answers without loading any of them."""
        with formatter.section("Commands"):
            formatter.write_dl(list(COMMANDS.items()))


@click.group(cls=Commands, context_settings={"help_option_names": ["-h", "--help"]})
@click.version_option(package_name="mix-temperature-advisor", message="%(version)s")
def advisor() -> None:
    """Temperature setpoints for a hot-mix asphalt plant, with limits, reasons and cost.

    \b
    Example:
      advisor setpoints demo_plant
      advisor setpoints --help
    """


def main(arguments: Sequence[str] | None = None) -> None:
    """Run the command in ``arguments``; end with 0, 2 for faulty input, 1 for anything else."""
    given = list(sys.argv[1:] if arguments is None else arguments)
    try:
        code = advisor.main(given, prog_name="advisor", standalone_mode=False)
    except click.ClickException as error:
        code = _refuse_usage(error, "--json" in given)
    except AdvisorError as error:
        code = _refuse(error, "--json" in given)
    except click.Abort:
        code = 1
    except BrokenPipeError:  # whoever read the output has seen enough
        sys.stderr.close()
        code = 1
    except OSError as error:
        problem = f"{error.strerror or error}."
        code = _refuse(
            AdvisorError(Fault("file", problem, file=str(error.filename or ""))), "--json" in given
        )
    except Exception as error:  # a mistake of ours: told in one sentence, with its place
        if sys.flags.dev_mode:  # python -X dev -m advisor
            raise
        code = _refuse(AdvisorError(_own_mistake(error)), "--json" in given)
    sys.exit(code if isinstance(code, int) else 0)


def _own_mistake(error: Exception) -> Fault:
    """The fault that says where the program itself went wrong."""
    last = traceback.extract_tb(error.__traceback__)[-1]
    said = f"{type(error).__name__}: {error}".rstrip(": ")
    return Fault(
        "program",
        f"The program itself went wrong: {said}.",
        "No advice is given. Tell its developers this line and the command you gave.",
        file=last.filename,
        line=last.lineno,
    )


def _refuse(error: AdvisorError, as_json: bool) -> int:
    """Print every fault, for a person to stderr or as JSON to stdout; the exit code."""
    if as_json:
        faults = [fault.as_dict() for fault in error.faults]
        click.echo(json.dumps({"faults": faults}, ensure_ascii=False, indent=2))
    else:
        for fault in error.faults:
            click.echo(str(fault), err=True)
        if len(error.faults) > 1:
            click.echo(f"{len(error.faults)} faults.", err=True)
    return 2 if isinstance(error, FaultyInput) else 1


def _refuse_usage(error: click.ClickException, as_json: bool) -> int:
    if as_json:
        asked = error.ctx if isinstance(error, click.UsageError) else None
        remedy = f"See '{asked.command_path if asked else 'advisor'} --help'."
        return _refuse(FaultyInput(Fault("usage", error.format_message(), remedy)), as_json)
    error.show()
    return 2
