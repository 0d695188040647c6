"""For every test: seldom looking for cycles.

The reviews that tests keep are large and live long; going through them for cycles took a sixth of the time of the suite.
"""

from __future__ import annotations

import gc

gc.set_threshold(100_000, 20, 100)
