"""Evaluation of the survey at the Tarnholt cable railway (invented data)."""
import numpy as np

SPAN = 184.0  # metres between pylons 4 and 5


def excess_length(x):
    """Length of the rope over the chord, for a slope x."""
    return np.sqrt(1 + x**2) - 1


def damping(t):
    # leading-order: small t, on 0 <= t <= 0.5, within 1e-4
    return np.exp(-t) * np.cos(t)


def load_number(x):
    return np.log1p(x) - x


if __name__ == "__main__":
    slopes = np.linspace(0.0, 0.2, 5)
    print(SPAN * excess_length(slopes))
