"""Draws and what they say of an output."""

from __future__ import annotations

import numpy as np

from advisor.sampling import Draws, contributions_sd, quantile

CASES = np.linspace(100.0, 200.0, 1000)


def bench_quantile() -> int:
    """the 95 % quantile of 400 draws of each of 1 000 temperatures"""
    quantile(Draws(400).normal("reading", CASES, 2.0), 0.95)
    return CASES.size


def bench_contributions() -> int:
    """what each of ten inputs adds to an output, 2 000 draws"""
    draws = Draws(2000)
    inputs = {f"input {n}": draws.normal(f"input {n}", 0.0, 1.0) for n in range(10)}
    contributions_sd(sum(inputs.values()), inputs)
    return 1
