"""Settings for all tests: small matrices are solved faster by one thread than by several that wait for each other."""

import os

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
