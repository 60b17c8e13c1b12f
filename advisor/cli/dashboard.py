"""advisor dashboard: the pages for operator and manager, in a browser."""

from __future__ import annotations

from pathlib import Path

import click

from advisor.cli.asked import plant_argument


@click.command()
@plant_argument
@click.option(
    "--port", type=click.IntRange(0, 65535), help="Port; 8617 if not given, 0 for any free one."
)
@click.option(
    "--host", metavar="ADDRESS", help="Address to answer at; this machine only if not given."
)
@click.option("--quiet-start", is_flag=True, help="Do not open a browser.")
def dashboard(plant: Path, port: int | None, host: str | None, quiet_start: bool) -> None:
    """Show the pages of PLANT in a browser until Ctrl-C.

    They are served from this machine to this machine; nothing is loaded from the internet and
    nothing is written to any controller.

    \b
    Examples:
      advisor dashboard demo_plant
      advisor dashboard demo_plant --port 9000 --quiet-start
    """
    import webbrowser

    from advisor.screens.server import HOST, PORT, PageServer, is_loopback

    click.echo("Opening the plant ...", err=True)
    address = HOST if host is None else host
    server = PageServer(plant, address, PORT if port is None else port)
    if not is_loopback(address):
        click.echo(
            "Everybody who can reach this machine can now read these pages: there is no password.",
            err=True,
        )
    click.echo(f"{server.source.plant_name}: {server.address}  (Ctrl-C ends it)")
    if not quiet_start:
        webbrowser.open(server.address)
    try:
        server.serve()
    except KeyboardInterrupt:
        click.echo("Ended.", err=True)
