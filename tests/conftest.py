"""One thread for the linear algebra, and on CI the same random examples in every run.

Tests run side by side, and timings and digits stay the same with one thread. A developer's runs draw new examples each time; what
they find becomes an example of its own (`@example`), while a run on CI speaks of the change alone.
"""

import os

from hypothesis import settings

for name in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ.setdefault(name, "1")

settings.register_profile("ci", derandomize=True, print_blob=True)
if os.environ.get("CI"):
    settings.load_profile("ci")
