"""Where to strike a loaded frame drum: how strongly each mode answers at a few points.

Shows how a script builds a study in code, runs it once and asks for the mode shapes at
any point of the head. All figures are made up.
"""

import numpy as np

from membrane import run, study_from

RADIUS = 0.178  # m
FRACTIONS = np.array([0.0, 0.25, 0.5, 0.75, 0.9])

STUDY = {
    "title": "Loaded frame drum",
    "outline": {"shape": "disc", "diameter": 2 * RADIUS},
    "patches": [
        {"name": "paste", "shape": "disc", "diameter": "90 mm", "added_density": "1.9 kg/m^2"}
    ],
    "head": {"areal_density": "0.262 kg/m^2", "tension": "3 kN/m"},
    "modes": {"count": 8},
}


def main() -> None:
    spectrum = run(study_from(STUDY))
    points = np.array([FRACTIONS * RADIUS * 0.999, np.zeros(len(FRACTIONS))])
    answer = np.abs(spectrum.modes.at(points))
    print("mode        Hz   struck at r/a = " + "".join(f"{f:8.2f}" for f in FRACTIONS))
    for partial, strengths in zip(spectrum.partials, answer / answer.max(), strict=True):
        row = "".join(f"{s:8.2f}" for s in strengths)
        print(f"{partial.number:4d}  {partial.frequency:8.2f}" + 18 * " " + row)
    assert answer[1, 0] < 1e-6 * answer.max(), "a struck middle must leave (1,1) silent"


if __name__ == "__main__":
    main()
