"""A made-up plant for the pages: every number here is invented to exercise the screens."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from datetime import UTC, datetime, timedelta
from zoneinfo import ZoneInfo

import numpy as np

from advisor.advice.result import (
    Advice,
    Caution,
    Clash,
    Contribution,
    Heat,
    InputUsed,
    Limit,
    PathPoint,
    Point,
    Reason,
    Remedy,
    Rolling,
    Setpoint,
    Side,
)
from advisor.errors import MissingInput
from advisor.figures.drawn import Reading, TicketPoint, Trace, WindowSpan
from advisor.review.result import (
    NO_WASTE,
    Excursion,
    HourCell,
    MixShare,
    Review,
    SetAside,
    Span,
    StateShare,
    Waste,
)
from advisor.screens.source import JobChoice, LaterHour
from advisor.settings.certificate import Certificate

ZONE = ZoneInfo("Europe/London")
NOW = datetime(2026, 10, 23, 9, 10, tzinfo=UTC)
WEEK = datetime(2026, 10, 18, 23, 0, tzinfo=UTC)


def limit(point: Point, side: Side, value: float, name: str, authority: str, written: str) -> Limit:
    return Limit(
        point,
        side,
        value,
        name,
        authority,  # type: ignore[arg-type]
        f"{authority} document, invented",
        "entered" if authority != "computed" else "derived",
        written,
        1.8 if authority == "computed" else 0.0,
    )


SUPPLIER = limit("discharge", "high", 170, "supplier's maximum", "supplier", "170 °C")
TANK_MAX = limit("binder_tank", "high", 165, "supplier's storage maximum", "supplier", "165 °C")
MIXING = limit("binder_tank", "low", 148, "binder pumpable and coating", "computed", "")
NEED = limit("discharge", "low", 151, "paver needs 141", "computed", "")
HOLD = limit("silo", "high", 162, "hold 6 h at most", "house", "162 °C")
LOAD = limit("load_out", "low", 149, "haul of 41 min", "computed", "")
CONTRACT = limit("delivery", "low", 135, "contract minimum at the paver", "contract", "135 °C")
ROLL = limit("delivery", "low", 141, "rolling 14 min wanted", "computed", "")
TOP = limit("delivery", "high", 156, "drum at its high", "computed", "")


def setpoints() -> tuple[Setpoint, ...]:
    return (
        Setpoint("binder_tank", "Binder tank", 148, 152, 158, MIXING, TANK_MAX, 1.0),
        Setpoint("discharge", "Drum discharge", 151, 156, 165, NEED, SUPPLIER, 2.1),
        Setpoint("silo", "Silo", 149, 154, 162, NEED, HOLD, 2.1),
        Setpoint("load_out", "Load-out", 149, 154, 162, LOAD, HOLD, 2.0),
        Setpoint("delivery", "At paver", 141, 146, 156, ROLL, TOP, 1.8),
    )


def advice(at: datetime = NOW, job: str = "J-3") -> Advice:
    return Advice(
        plant="Harrow Fen plant (invented)",
        mix="S-10",
        mix_name="surface course 10 mm",
        tank="tank 2",
        job=job,
        job_name="Mill Road",
        at=at,
        valid_until=at + timedelta(hours=1, minutes=50),
        valid_because="or the next binder receipt",
        setpoints=setpoints(),
        limits=(SUPPLIER, TANK_MAX, MIXING, NEED, HOLD, LOAD, CONTRACT, ROLL, TOP),
        reasons=(
            Reason("paving-low", "Rolling 14 min on a 9 °C base sets the low side: 141 at paver."),
            Reason("haul", "The haul of 41 min under a tarpaulin costs 8 °C."),
            Reason("supplier-high", "The supplier's 170 °C less the drum's scatter sets the high."),
        ),
        inputs=(
            InputUsed("Binder viscosity", "0.40 Pa.s at 135 °C", "certificate K-114", 9 * 86400.0),
            InputUsed("Air temperature", "9 °C", "weather of 10:00", 600.0),
            InputUsed("Wind", "5 m/s", "weather of 10:00", 600.0),
            InputUsed("Haul", "41 min ± 6 min", "job J-3"),
            InputUsed(
                "Drop truck to screed",
                "2 °C",
                "nobody entered it",
                None,
                True,
                "the usual drop through a paver",
            ),
        ),
        cautions=(
            Caution(
                "advice-only",
                "Advice only. The plant's own controls, trips and procedures "
                "come first; check the supplier's data sheet and the contract.",
            ),
            Caution("flash", "Keep tank 2 at least 30 °C under its flash point (262 °C)."),
        ),
        passed_over=("The coating optimum of 158 at the drum was passed over for fuel.",),
        path=(
            PathPoint("drum", 0, 151, 156, 165),
            PathPoint("silo", 2, 149.6, 154.6, 163),
            PathPoint("load-out", 26, 149, 154, 162),
            PathPoint("paver", 67, 141, 146, 156),
            PathPoint("first pass", 75, 138, 143, 152),
        ),
        rolling=Rolling(13, 15.5, 18, 14, 80, "mid-depth at 80 °C"),
        heat=Heat(88, 79, 16.1, 0.041, 4.9, "GBP"),
        contributions=(
            Contribution("wind at the site", 1.6),
            Contribution("haul time", 1.2),
            Contribution("binder viscosity", 0.6),
        ),
        felt_truck_min=26,
        felt_paver_min=66,
        wait_left_min=22,
        arrival_c=147,
        arrival_sd_k=2,
        version="0.1.0",
    )


def clashing(at: datetime = NOW) -> Advice:
    contract = limit("delivery", "low", 160, "contract minimum at the paver", "contract", "160 °C")
    return replace(
        advice(at),
        setpoints=(),
        path=(),
        rolling=None,
        clash=Clash(
            replace(contract, point="discharge", value_c=173.5),
            SUPPLIER,
            173.5,
            170.0,
            (
                Remedy("Use insulated bodies", 5.1, True, "check that they are dry"),
                Remedy("Cut the queue at the paver to 5 min", 1.9, False),
            ),
        ),
    )


class MadeUpPlant:
    """A plant that answers every question of the pages from invented numbers."""

    plant_name = "Harrow Fen plant (invented)"
    invented = True
    zone = ZONE

    def __init__(
        self,
        shown: Advice | None = None,
        last_reading: datetime | None = NOW - timedelta(seconds=8),
        readings: Sequence[Reading] | None = None,
        fails: bool = False,
    ) -> None:
        self.shown = shown
        self.last_reading = last_reading
        self.given_readings = readings
        self.fails = fails
        self.asked: list[tuple[str | None, datetime | None]] = []

    def now(self) -> datetime:
        return NOW

    def shift_name(self, at: datetime) -> str:
        return "early shift"

    def jobs(self) -> Sequence[JobChoice]:
        return (JobChoice("J-3", "Mill Road", "S-10"), JobChoice("J-7", "Quay Street", "B-20"))

    def current_advice(self, job: str | None, at: datetime | None, units: str = "si") -> Advice:
        self.asked.append((job, at))
        if self.fails:
            raise MissingInput.of(
                "no-certificate",
                "Tank 2 has no certificate.",
                "Enter the supplier's certificate for tank 2.",
                file="records/certificates.yaml",
                field="tank 2",
            )
        return replace(self.shown or advice(), at=at or NOW, job=job or "J-3")

    def rest_of_shift(
        self, job: str | None, at: datetime, units: str = "si"
    ) -> Sequence[LaterHour]:
        hour = at.replace(minute=0) + timedelta(hours=1)
        return (
            LaterHour(hour, "air 9 °C, wind 5 m/s", 156),
            LaterHour(hour + timedelta(hours=1), "after load 2 in tank 2", 159),
            LaterHour(hour + timedelta(hours=2), "wind 8 m/s", 160),
            LaterHour(hour + timedelta(hours=3), "rain likely: last load-out 13:40", None),
        )

    def readings(self, at: datetime) -> Sequence[Reading]:
        if self.given_readings is not None:
            return self.given_readings
        return (
            Reading("binder_tank", 153.2, 1.0, at),
            Reading("discharge", 168.0, 1.1, at),
            Reading("silo", 158.0, 1.5, at, "stuck since 08:40"),
            Reading("load_out", 160.0, 1.2, at),
            Reading("delivery", 147.0, 2.0, at),
        )

    def last_reading_at(self, at: datetime) -> datetime | None:
        return self.last_reading

    def discharge(self, start: datetime, end: datetime) -> Trace:
        minutes = np.arange(0, (end - start).total_seconds() / 60 + 1)
        times = np.datetime64(start.replace(tzinfo=None)) + minutes.astype("timedelta64[m]")
        noise = np.random.default_rng(4).normal(0, 1.3, minutes.size)
        values = 156.5 + noise + 2 * np.sin(minutes / 47)
        left = (np.datetime64(end.replace(tzinfo=None)) - times) / np.timedelta64(1, "m")
        values += np.where(left < 45, (45 - left) * 0.25, 0)
        values[(left > 120) & (left < 132)] = np.nan
        return Trace(times, values)

    def windows_in_force(self, start: datetime, end: datetime) -> Sequence[WindowSpan]:
        change = start + (end - start) * 0.55
        return (
            WindowSpan(start, change, 149, 154, 163, "S-10"),
            WindowSpan(change, end, 151, 156, 165, "S-10"),
        )

    def excursions_open(self, at: datetime, units: str = "si") -> Sequence[Excursion]:
        return (replace(EXCURSIONS[0], start=at - timedelta(minutes=18), end=at, minutes=18),)

    def data_span(self) -> tuple[datetime, datetime]:
        return WEEK, WEEK + timedelta(days=7)

    def review(self, start: datetime, end: datetime, units: str = "si") -> Review:
        return review(start, end)

    def certificates(self, at: datetime) -> Sequence[Certificate]:
        return ()

    def situation(self, job: str | None, units: str = "si"):
        raise MissingInput.of("made-up", "A made-up plant has no situation.", "Use a real one.")

    def tickets(self, start: datetime, end: datetime) -> Sequence[TicketPoint]:
        count = max(int((end - start) / timedelta(minutes=12)), 0)
        return tuple(
            TicketPoint(
                f"{4100 + n}",
                start + timedelta(minutes=12 * n),
                "S-10",
                f"T{n % 7}",
                20_000,
                155 + n % 4,
            )
            for n in range(min(count, 300))
        )


def waste(kwh: float) -> Waste:
    return Waste(
        kwh * 3.2,
        Span(0.75 * kwh, kwh, 1.35 * kwh),
        Span(0.75 * kwh * 0.055, kwh * 0.055, 1.35 * kwh * 0.055),
        Span(0.75 * kwh * 0.2, kwh * 0.2, 1.35 * kwh * 0.2),
    )


def excursion(
    day: int,
    hour: float,
    minutes: float,
    side: str,
    peak: float,
    cause: str,
    evidence: str,
    state: str = "production",
    mix: str = "S-10",
) -> Excursion:
    start = WEEK + timedelta(days=day, hours=hour)
    tonnes = minutes * 3.1
    return Excursion(
        "discharge",
        side,
        start,
        start + timedelta(minutes=minutes),  # type: ignore[arg-type]
        minutes,
        tonnes,
        peak,
        peak * 0.6,
        165 if side == "hot" else 151,
        mix,
        "J-3",
        "tank 2",
        state,  # type: ignore[arg-type]
        waste(tonnes * peak * 0.6 * 0.31) if side == "hot" else NO_WASTE,
        cause,
        evidence,
    )


EXCURSIONS = (
    excursion(4, 9.86, 18, "hot", 3.0, "moisture fell, burner did not follow",
              "moisture entered fell from 5.1 to 4.2 % at 09:40"),
    excursion(1, 6.0, 64, "hot", 11.0, "setpoint left from the mix before",
              "the setpoint of B-20 stayed after the change to S-10 at 06:02", mix="S-10"),
    excursion(2, 13.5, 41, "hot", 8.2, "moisture fell, burner did not follow",
              "moisture entered fell from 5.6 to 4.4 % at 13:31"),
    excursion(3, 7.2, 22, "hot", 6.4, "start-up", "first 40 min after lighting", "start-up",
              "B-20"),
    excursion(5, 22.5, 95, "cold", 9.3, "cold night start", "air 2 °C, first load of the shift",
              "start-up", "B-20"),
    excursion(0, 10.1, 13, "cold", 4.1, "rate rose, burner did not follow",
              "rate rose from 160 to 220 t/h"),
)  # fmt: skip


def cells() -> tuple[HourCell, ...]:
    found = []
    rng = np.random.default_rng(8)
    for day in range(7):
        name = f"{(WEEK + timedelta(days=day, hours=2)).astimezone(ZONE):%Y-%m-%d}"
        for hour in range(24):
            working = (
                (6 <= hour <= 16 and day < 5)
                or (day == 5 and hour >= 21)
                or (day == 6 and hour < 5)
            )
            if not working:
                found.append(HourCell(name, hour, 0.0, None, 0.0, 0.0))
                continue
            distance = 0.0
            if rng.random() < 0.3:
                distance = float(rng.choice([-1, 1, 1])) * float(rng.gamma(2, 2.2))
            found.append(
                HourCell(name, hour, 180.0, distance, 60.0 if distance > 0 else 0.0,
                         45.0 if distance < 0 else 0.0)
            )  # fmt: skip
    return tuple(found)


def review(start: datetime = WEEK, end: datetime = WEEK + timedelta(days=7)) -> Review:
    inside = tuple(one for one in EXCURSIONS if one.end > start and one.start < end)
    total = sum((one.waste for one in inside), NO_WASTE)
    return Review(
        plant="Harrow Fen plant (invented)",
        start=start,
        end=end,
        time_zone="Europe/London",
        rows_read=10_080,
        rows_used=9_412,
        rows_set_aside=668,
        set_aside=(
            SetAside("stuck", "silo_1_c", 312, start + timedelta(2), start + timedelta(3)),
            SetAside("empty conveyor", "discharge_c", 344),
            SetAside("spike", "discharge_c", 12),
        ),
        states=(
            StateShare("off", 5_900, 0),
            StateShare("start-up", 260, 410),
            StateShare("production", 3_600, 9_980),
            StateShare("mix change", 90, 160),
            StateShare("stop", 230, 0),
        ),
        cells=cells(),
        mixes=(
            MixShare("S-10", 6_100, 610, 40, 250, 157.9, waste(900)),
            MixShare("B-20", 3_400, 120, 300, 0, 158.8, waste(150)),
            MixShare("S-10 warm", 1_050, 30, 0, 0, 138.0, waste(20)),
        ),
        excursions=inside,
        tonnes=10_550,
        in_window_tonnes=9_200,
        hot_tonnes=760,
        cold_tonnes=340,
        no_advice_tonnes=250,
        waste=total,
        start_up_waste=waste(70),
        currency="GBP",
        sentence="Between 310 and 560 kWh a day too much, 17 to 31 GBP; most of it mix S-10 "
        "before nine.",
        cautions=("Fuel is worked out from temperatures, not metered: treat it as an estimate.",),
    )  # fmt: skip
