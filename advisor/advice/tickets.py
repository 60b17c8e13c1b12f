"""What a loading ticket says, found by its number in the plant's files."""

from __future__ import annotations

import math
from dataclasses import dataclass
from datetime import datetime

from advisor.errors import FaultyInput
from advisor.settings.folder import PlantFolder


@dataclass(frozen=True)
class TicketTold:
    """A load by its ticket; ``load_out_c`` [C] and ``job`` are None where it does not tell them."""

    ticket: str
    loaded_at: datetime
    load_out_c: float | None
    job: str | None


def ticket_told(folder: PlantFolder, ticket: str) -> TicketTold:
    """What the ticket with the number ``ticket`` says.

    Raises FaultyInput where no ticket of ``folder`` has it.
    """
    from advisor.logs import read_kind

    frame, _ = read_kind(folder, "tickets")
    own = frame[(frame["ticket"] == ticket).to_numpy()] if len(frame) else frame
    if own.empty:
        last = f" The last one is {frame['ticket'].iloc[-1]}." if len(frame) else ""
        raise FaultyInput.of(
            "no-ticket",
            f"There is no ticket '{ticket}'.{last}",
            "Give its number, or --load-out and --job.",
            field="ticket",
            value=ticket,
        )
    row = own.iloc[-1]
    out = float(row["load_out_c"]) if "load_out_c" in own else math.nan
    return TicketTold(
        ticket,
        row["time"].to_pydatetime(),
        out if math.isfinite(out) else None,
        str(row["job"]) if "job" in own and row["job"] else None,
    )
