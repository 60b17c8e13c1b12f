"""Advice for the invented plant: windows, clashes, missing inputs, what was known when."""

from dataclasses import replace
from datetime import UTC, datetime, timedelta

import numpy as np
import pytest

from advisor.advice.advise import advise, advise_all
from advisor.advice.ledger import tank_content
from advisor.advice.open_plant import open_plant
from advisor.advice.result import AUTHORITIES
from advisor.advice.situation import gather_situation
from advisor.advice.timeline import build_timeline, timeline_frame
from advisor.binder import temperature_avts, viscosity_avts
from advisor.errors import FaultyInput, MissingInput

SHOWN_AT = datetime(2026, 10, 23, 9, 10, tzinfo=UTC)
JOBS = ("J01", "J02", "J03", "J04", "J05", "J06", "J07")


def at_demo(demo, job=None, at=SHOWN_AT, tank=None):
    return advise(gather_situation(demo, at, job, tank))


@pytest.mark.parametrize("job", JOBS)
def test_every_setpoint_lies_between_its_limits_and_each_limit_names_its_owner(demo, job):
    advice = at_demo(demo, job)
    assert advice.clash or advice.setpoints
    for one in advice.setpoints:
        assert one.low_c <= one.target_c <= one.high_c
        for limit in (one.low_set_by, one.high_set_by):
            assert limit.source and limit.authority in AUTHORITIES and limit.how_known


@pytest.mark.parametrize("job", JOBS)
def test_no_setpoint_exceeds_what_a_supplier_a_contract_or_safety_allows(demo, job):
    advice = at_demo(demo, job)
    for limit in advice.limits:
        setpoint = advice.setpoint(limit.point)
        if setpoint and limit.side == "high" and limit.authority != "computed":
            assert setpoint.high_c <= limit.value_c + 1e-6


def test_the_plain_binder_by_capillaries_is_mixed_at_its_own_viscosity(demo):
    # the line through both points of the certificate of lot A-2641, ASTM D2493, and 0.17 Pa.s
    # (Asphalt Institute MS-2): 16 P/s * 168.4 s = 2694 P at 60 C; 1.2 mm2/s2 * 361.5 s = 433.8
    # mm2/s at 135 C times 956.3 kg/m3 (D4311 from 1032 at 15 C) = 414.8 mPa.s
    eta = np.array([269.44, 0.41486])
    x = np.log10(np.array([60.0, 135.0]) * 1.8 + 491.67)
    y = np.log10(np.log10(eta * 1000.0))
    slope = (y[1] - y[0]) / (x[1] - x[0])
    expected = temperature_avts(0.17, y[0] - slope * x[0], slope)
    assert viscosity_avts(60.0, y[0] - slope * x[0], slope) == pytest.approx(269.44)
    target = at_demo(demo, "J03").setpoint("discharge").target_c
    assert target == pytest.approx(float(expected), abs=0.2)


def test_the_modified_binder_takes_the_suppliers_range_and_says_why(demo):
    advice = at_demo(demo, "J06")
    discharge = advice.setpoint("discharge")
    assert discharge.high_c == 180.0
    assert discharge.high_set_by.authority == "supplier"
    assert any("equal viscosity is not used" in reason.sentence for reason in advice.reasons)
    assert any(caution.code == "C8" for caution in advice.cautions)


def test_the_impossible_job_gets_no_number_but_two_limits_and_remedies(demo):
    advice = at_demo(demo, "J08")
    assert advice.setpoints == ()
    assert advice.clash.lower.point == "delivery"
    assert advice.clash.upper.authority == "contract"
    assert advice.clash.remedies
    for remedy in advice.clash.remedies:
        assert remedy.enough == (remedy.gain_k >= advice.clash.gap_k)


def test_what_the_contract_says_silences_the_national_table(demo):
    advice = at_demo(demo, "J02")
    delivery = advice.setpoint("delivery")
    assert delivery.low_set_by.as_written == "280 F"
    assert any("contract has its own figure" in words for words in advice.passed_over)


def test_a_longer_haul_asks_for_more_at_load_out(demo):
    situation = gather_situation(demo, SHOWN_AT, "J01")
    job = situation.job
    farther = job.model_copy(
        update={"haul": job.haul.model_copy(update={"time": type(job.haul.time)(5400.0)})}
    )
    near, far = advise_all([situation, replace(situation, job=farther)])
    assert far.setpoint("load_out").low_c > near.setpoint("load_out").low_c + 2.0


def test_missing_weather_is_asked_for_not_assumed(demo):
    advice = advise(
        gather_situation(replace(demo, weather=None, metar=None, forecast=None), SHOWN_AT)
    )
    assert advice.setpoints == ()
    assert any("weather is not known" in sentence for sentence in advice.missing)


def test_weather_too_old_counts_as_missing(demo):
    late = demo.weather[demo.weather["time"] < SHOWN_AT - timedelta(hours=3)]
    advice = advise(
        gather_situation(replace(demo, weather=late, metar=None, forecast=None), SHOWN_AT)
    )
    assert advice.missing


def test_a_time_without_a_job_names_the_jobs_there_are(demo):
    with pytest.raises(MissingInput, match="J01, J02"):
        gather_situation(demo, datetime(2026, 10, 23, 2, 0, tzinfo=UTC))


def test_an_unknown_job_suggests_the_nearest(demo):
    with pytest.raises(FaultyInput, match="J0"):
        gather_situation(demo, SHOWN_AT, "J011")


def test_every_default_used_is_listed(demo):
    advice = at_demo(demo, "J08")
    assumed = {one.name for one in advice.inputs if one.assumed}
    assert {"tank", "base surface", "mix rate"} <= assumed


def test_a_blended_tank_is_provisional_and_lies_between_its_lots(demo):
    advice = at_demo(demo, "J02")
    assert advice.provisional
    shares = dict(tank_content(demo, "tank 2", SHOWN_AT).shares)
    assert set(shares) == {"A-2642", "B-4410"}
    assert sum(shares.values()) == pytest.approx(1.0)
    target = advice.setpoint("discharge").target_c
    # 0.17 Pa.s of the two certificates alone: 154.8 and 161.9 C
    assert 154.8 < target < 161.9


def test_advice_of_the_past_knows_nothing_recorded_later(demo):
    before = datetime(2026, 10, 21, 7, 30, tzinfo=UTC)
    early = at_demo(demo, "J02", before)
    limited = advise(gather_situation(replace(demo, known_at=before), before, "J02"))
    assert early.setpoints == limited.setpoints
    with pytest.raises(MissingInput):
        gather_situation(replace(demo, known_at=datetime(2026, 10, 1, tzinfo=UTC)), before)


def test_the_same_moment_gives_the_same_advice_to_the_last_digit(demo):
    assert at_demo(demo, "J04").setpoints == at_demo(demo, "J04").setpoints


def test_advice_alone_and_among_others_agrees(demo):
    situations = [gather_situation(demo, SHOWN_AT, job) for job in JOBS]
    together = advise_all(situations)
    for situation, advice in zip(situations, together, strict=True):
        alone = advise(situation)
        for one, other in zip(advice.setpoints, alone.setpoints, strict=True):
            assert one.target_c == pytest.approx(other.target_c, abs=0.05)


def test_the_timeline_has_a_row_for_every_change(demo):
    start, end = datetime(2026, 10, 23, 4, tzinfo=UTC), datetime(2026, 10, 23, 15, tzinfo=UTC)
    calls = []
    rows = build_timeline(demo, start, end, lambda done, of: calls.append((done, of)))
    assert rows == sorted(rows, key=lambda row: row.start)
    assert calls[-1][0] == calls[-1][1] > 0
    assert {row.change for row in rows} >= {"job starts", "weather"}
    frame = timeline_frame(rows)
    assert frame["start"].is_monotonic_increasing
    assert (frame["discharge_low_c"] <= frame["discharge_high_c"]).all()


def test_an_additive_in_the_binder_and_on_the_mix_lowers_the_window_once(own_demo):
    def low_c():
        with open_plant(own_demo).records as records:
            facts = replace(open_plant(own_demo), records=records)
            advice = advise(gather_situation(facts, SHOWN_AT, "J05"))
            (edge,) = [
                one for one in advice.limits if one.side == "low" and one.name.startswith("coating")
            ]
            return edge.value_c

    by_mix = low_c()
    path = own_demo / "records" / "certificates.yaml"
    text = path.read_text("utf-8")
    path.write_text(text.replace("modifier: none", "modifier: none\n      additives: [surfactant]"))
    both = low_c()
    mixes = own_demo / "mixes.yaml"
    lines = mixes.read_text("utf-8").splitlines(keepends=True)
    start = next(i for i, line in enumerate(lines) if line.startswith("    additive:"))
    del lines[start : start + 5]
    mixes.write_text("".join(lines), "utf-8")
    assert both == pytest.approx(low_c())  # as the binder has it, the mix adds nothing
    assert both > by_mix  # 5 to 12 K of the table instead of the supplier's 15 to 25
