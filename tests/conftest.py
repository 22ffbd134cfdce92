"""Settings that every test shares: repeatable examples, and one thread for each process."""

import os

from hypothesis import settings

# As the command line does. Threads of several test processes would wait for each other, and
# make the suite several times as long. Set before numpy is first imported.
for library in ("OPENBLAS", "OMP", "MKL"):
    os.environ.setdefault(f"{library}_NUM_THREADS", "1")

settings.register_profile("repeatable", derandomize=True, deadline=None)
settings.load_profile("repeatable")
