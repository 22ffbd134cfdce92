"""Two outlines of different shape that sound alike, compared mode by mode.

Shows how a script loads a study file, runs it and reads the frequencies as an array.
"""

from pathlib import Path

import numpy as np

from membrane import read_study, run

HERE = Path(__file__).parent
PRINTED = "{:4d}  {:10.4f} Hz  {:10.4f} Hz"


def main() -> None:
    one, two = (
        run(read_study(HERE / f"isospectral_{which}.toml")).frequencies for which in ("one", "two")
    )
    for number, pair in enumerate(zip(one, two, strict=True), 1):
        print(PRINTED.format(number, *pair))
    worst = np.abs(1200 * np.log2(one / two)).max()
    print(f"largest difference: {worst:.1e} cent")
    assert worst < 1e-5, "the two outlines should sound alike"


if __name__ == "__main__":
    main()
