"""The phase-domain solutions are many small dense matrices: more than one thread makes them slower, not faster."""

import os

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
