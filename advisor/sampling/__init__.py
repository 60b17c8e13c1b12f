"""Draws of uncertain inputs and what they say of an output; knows nothing of asphalt."""

from advisor.sampling.draws import Draws
from advisor.sampling.summary import contributions_sd, quantile, share_true

__all__ = ["Draws", "contributions_sd", "quantile", "share_true"]
