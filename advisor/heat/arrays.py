"""What the functions of this room take and give: a number, or one for each case."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Numbers = float | Floats
