"""Where neighbouring sides meet, correctly rounded, for very many sides at once.

Method
    With border points a, b and ways d, e of two sides, they meet at a + t d, t = ((b - a) x e) / (d x e). The step
    t d is short where sides are, so that its error n is far below the last place of the sum. If a + (t d - n) and
    a + (t d + n) round to the same double, so does the exact sum, since rounding is monotone; else integers decide.
Exactness
    Only pairs whose differences are exact are tried in floats. With u = 2**-53, products are taken with their
    rounding errors (Dekker 1971), so that a cross product errs by less than E = 4 u |x y - x' y'| + 8 u u (|x y| +
    |x' y'|), hence t by a part of less than E_q / |q| + 2 E_w / |w| + 2 u, q its numerator and w its denominator, if
    E_w < |w| / 2, and each component of t d by that and 2 u more.
"""

import numpy as np
import numpy.typing as npt

from kernelscan.geometry.predicates import exact_line, meet, rounded

__all__ = ["corners_between"]

Floats = npt.NDArray[np.float64]

UNIT = 2.0**-53
TINY = 2.0**-1000
FEW = 50
SPLITTER = 2.0**27 + 1


def corners_between(before: Floats, after: Floats) -> Floats:
    """Return ``(k, 2)`` where the borders of ``(k, 6)`` rows meet those of others that turn left from them."""
    if len(before) <= FEW:
        return _exactly_between(before, after)
    with np.errstate(over="ignore", invalid="ignore", under="ignore", divide="ignore"):
        a = before[:, :2]
        d, d_exact = _difference(before[:, 4:], before[:, 2:4])
        e, e_exact = _difference(after[:, 4:], after[:, 2:4])
        g, g_exact = _difference(after[:, :2], a)
        q, q_error = _cross(g, e)
        w, w_error = _cross(d, e)
        step = (q / w)[:, None] * d
        part = np.where(q == 0, 0, q_error / np.abs(q)) + 2 * w_error / np.abs(w) + 4 * UNIT
        n = 2 * part[:, None] * np.abs(step) + TINY
        corners, other = a + (step - n), a + (step + n)
        sure = d_exact & e_exact & g_exact & (2 * w_error < np.abs(w)) & (corners == other).all(axis=1)
    corners[~sure] = _exactly_between(before[~sure], after[~sure])
    return np.asarray(corners)


def _exactly_between(before: Floats, after: Floats) -> Floats:
    pairs = zip(before.tolist(), after.tolist(), strict=True)
    return np.array([rounded(meet(exact_line(g), exact_line(h))) for g, h in pairs]).reshape(-1, 2)


def _difference(p: Floats, q: Floats) -> tuple[Floats, npt.NDArray[np.bool_]]:
    """Return p - q, and for which rows it is exact (Knuth's two-sum leaves no rest)."""
    d = p - q
    back = p - d
    rest = (p - (d + back)) - (q - back)
    return d, np.asarray((rest == 0).all(axis=1))


def _cross(d: Floats, e: Floats) -> tuple[Floats, Floats]:
    left, left_rest = _product(d[:, 0], e[:, 1])
    right, right_rest = _product(d[:, 1], e[:, 0])
    value = (left - right) + (left_rest - right_rest)
    return value, 4 * UNIT * np.abs(value) + 8 * UNIT * UNIT * (np.abs(left) + np.abs(right)) + TINY


def _product(x: Floats, y: Floats) -> tuple[Floats, Floats]:
    """Return x y rounded, and the rest."""
    product = x * y
    x_high, x_low = _split(x)
    y_high, y_low = _split(y)
    return product, ((x_high * y_high - product) + x_high * y_low + x_low * y_high) + x_low * y_low


def _split(x: Floats) -> tuple[Floats, Floats]:
    shifted = SPLITTER * x
    high = shifted - (shifted - x)
    return high, x - high
