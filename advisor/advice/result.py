"""What an advice says: setpoints with limits, reasons and uncertainty, or the clash of two limits.

Plain frozen results. Times are aware datetimes in UTC, temperatures in C, differences in K.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import datetime
from typing import Literal

Authority = Literal["safety", "supplier", "contract", "national", "house", "computed"]
Side = Literal["low", "high"]
Point = Literal[
    "binder_tank", "hot_aggregate", "discharge", "silo", "load_out", "delivery", "stack"
]
HowKnown = Literal["looked up", "derived", "common practice", "from memory", "entered", "measured"]

# Highest authority first: where limits clash, the one of lower authority is the one to question.
AUTHORITIES: tuple[Authority, ...] = (
    "safety",
    "supplier",
    "contract",
    "national",
    "house",
    "computed",
)


@dataclass(frozen=True)
class Limit:
    """One bound on one point of the heat path, and who set it.

    ``value_c`` is the bound as it applies at ``point``; ``as_written`` is how its owner wrote it,
    in the owner's unit; ``sd_k`` is the standard deviation of a computed bound, else 0; ``beyond``
    says what happens outside it, where that is not plain.
    """

    point: Point
    side: Side
    value_c: float
    name: str
    authority: Authority
    source: str
    how_known: HowKnown
    as_written: str = ""
    sd_k: float = 0.0
    beyond: str = ""


@dataclass(frozen=True)
class Setpoint:
    """Low, target and high at one point; ``sd_k`` is the uncertainty of the low bound."""

    point: Point
    label: str
    low_c: float
    target_c: float
    high_c: float
    low_set_by: Limit
    high_set_by: Limit
    sd_k: float = 0.0


@dataclass(frozen=True)
class Remedy:
    """One way out of a clash: what it gains at discharge, whether that is enough, what it costs.

    ``cost`` is told in time, mass or money where that is known, else as 'not priced'.
    """

    action: str
    gain_k: float
    enough: bool
    caution: str = ""
    cost: str = "not priced"


@dataclass(frozen=True)
class Clash:
    """Two limits that no discharge temperature satisfies together.

    ``at_least_c`` and ``at_most_c`` are what the two ask of the discharge [C].
    """

    lower: Limit
    upper: Limit
    at_least_c: float
    at_most_c: float
    remedies: tuple[Remedy, ...] = ()

    @property
    def gap_k(self) -> float:
        """How far the two are apart at discharge [K]."""
        return self.at_least_c - self.at_most_c


@dataclass(frozen=True)
class InputUsed:
    """One input of the advice and where it came from.

    ``age_s`` is how old it was; ``assumed`` marks a default nobody entered, which is listed.
    """

    name: str
    shown: str
    origin: str
    age_s: float | None = None
    assumed: bool = False
    note: str = ""


@dataclass(frozen=True)
class Reason:
    """One sentence on why a number is what it is, most important first."""

    code: str
    sentence: str


@dataclass(frozen=True)
class Caution:
    """A caution shown beside the advice it belongs to."""

    code: str
    text: str


@dataclass(frozen=True)
class PathPoint:
    """One station on the heat path: minutes after discharge and the window there."""

    name: str
    minutes: float
    low_c: float
    target_c: float
    high_c: float


@dataclass(frozen=True)
class Rolling:
    """Minutes from laying to the end of rolling at the advised target: 5 %, 50 % and 95 %."""

    low_min: float
    middle_min: float
    high_min: float
    wanted_min: float
    end_c: float
    criterion: str


@dataclass(frozen=True)
class Contribution:
    """Degrees of uncertainty one input adds to the discharge temperature needed."""

    name: str
    sd_k: float


@dataclass(frozen=True)
class Heat:
    """Expected heat and fuel at the advised discharge temperature, per tonne of mix."""

    gross_kwh_t: float
    net_kwh_t: float
    co2_kg_t: float
    moisture_of_dry_mass: float
    money_t: float | None = None
    currency: str = ""


@dataclass(frozen=True)
class Burner:
    """What to expect of burner and stack at the advised discharge temperature.

    ``load`` is of the burner's rating [1], above 1 where it cannot; ``fuel_kgs`` [kg/s] and
    ``gross_w`` [W] are what it burns; the stack is told as low, expected and high [C] between its
    two ``stack_limits``; ``acid_dew_point_c`` is None for a fuel without sulfur. ``most_kgs`` is
    the most the plant can make at today's moisture and ``most_set_by`` 'burner', 'fan' or 'plant'.
    ``load_now`` and ``stack_now_c`` are read from the log, ``load_expected_now`` is the load that
    what is made now should take; None where the log does not tell.
    """

    load: float
    fuel_kgs: float
    gross_w: float
    stack_low_c: float
    stack_c: float
    stack_high_c: float
    stack_limits: tuple[Limit, Limit]
    dew_point_c: float
    acid_dew_point_c: float | None
    exhaust_m3s: float
    rate_kgs: float
    most_kgs: float
    most_set_by: str
    load_now: float | None = None
    load_expected_now: float | None = None
    stack_now_c: float | None = None


@dataclass(frozen=True)
class Advice:
    """Setpoints for one mix, tank and job at one time, or why there are none.

    ``setpoints`` is empty where ``clash`` or ``missing`` says why. ``passed_over`` are computed
    preferences that a firm limit pushed aside, each with a sentence.
    """

    plant: str
    mix: str
    mix_name: str
    tank: str
    job: str
    job_name: str
    at: datetime
    valid_until: datetime
    valid_because: str
    setpoints: tuple[Setpoint, ...]
    limits: tuple[Limit, ...]
    reasons: tuple[Reason, ...]
    inputs: tuple[InputUsed, ...]
    cautions: tuple[Caution, ...]
    clash: Clash | None = None
    missing: tuple[str, ...] = ()
    passed_over: tuple[str, ...] = ()
    path: tuple[PathPoint, ...] = ()
    rolling: Rolling | None = None
    heat: Heat | None = None
    burner: Burner | None = None
    most_rap_of_mix: float | None = None
    contributions: tuple[Contribution, ...] = ()
    confidence: float = 0.95
    felt_truck_min: float | None = None
    felt_paver_min: float | None = None
    wait_left_min: float | None = None
    arrival_c: float | None = None
    arrival_sd_k: float | None = None
    provisional: bool = False
    version: str = field(default="")

    def setpoint(self, point: Point) -> Setpoint | None:
        """The setpoint at ``point``, or None where the plant has no such point."""
        return next((one for one in self.setpoints if one.point == point), None)
