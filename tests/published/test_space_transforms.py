"""Published transforms between MNI152 and Talairach space, typed again from their sources.

Lancaster et al. 2007, Hum Brain Mapp 28:1194-1205 (three affine matrices, MNI to Talairach).
Brett 1999, The MNI brain and the Talairach atlas, MRC Cognition and Brain Sciences Unit.
"""

from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from revinf.knowledge import read_table
from revinf.spaces.transforms import mni_to_talairach, talairach_to_mni

LANCASTER = {
    "pooled": """ 0.9357  0.0029 -0.0072 -1.0423
                 -0.0065  0.9396 -0.0726 -1.3940
                  0.0103  0.0752  0.8967  3.6475""",
    "spm": """    0.9254  0.0024 -0.0118 -1.0207
                 -0.0048  0.9316 -0.0871 -1.7667
                  0.0152  0.0883  0.8924  4.0926""",
    "fsl": """    0.9464  0.0034 -0.0026 -1.0680
                 -0.0083  0.9479 -0.0580 -1.0239
                  0.0053  0.0617  0.9010  3.1883""",
}
POINTS = [(0, 0, 0), (-44, 20, 12), (54, -54, 24), (26, -36, -14), (-6, -80, -40)]


def exact(rows: str, point: tuple[int, int, int]) -> list[Fraction]:
    """Multiply by hand, in fractions."""
    numbers = [[Fraction(cell) for cell in line.split()] for line in rows.splitlines()]
    return [a * point[0] + b * point[1] + c * point[2] + d for a, b, c, d in numbers]


def brett(point: tuple[int, int, int]) -> list[Fraction]:
    """Apply the two published matrices by hand, the upper one from the plane z = 0 upwards."""
    x, y, z = (Fraction(value) for value in point)
    into_y, into_z = ("0.0460", "0.9189") if z >= 0 else ("0.0420", "0.8390")
    return [
        Fraction("0.9900") * x,
        Fraction("0.9688") * y + Fraction(into_y) * z,
        Fraction("-0.0485") * y + Fraction(into_z) * z,
    ]


@pytest.mark.parametrize("name", LANCASTER)
def test_table_holds_the_printed_rows_of_lancaster_2007(name):
    rows = [row for row in read_table("space_transforms") if row["transform"] == name]
    printed = [line.split() for line in LANCASTER[name].splitlines()]
    assert [row["axis"] for row in rows] == ["x", "y", "z"]
    assert [[row[c] for c in ("cx", "cy", "cz", "offset")] for row in rows] == printed
    assert all("Lancaster et al. 2007" in row["source"] for row in rows)


@pytest.mark.parametrize("point", POINTS)
@pytest.mark.parametrize("name", LANCASTER)
def test_lancaster_2007_forward_equals_the_matrix_product_by_hand(name, point):
    expected = [float(value) for value in exact(LANCASTER[name], point)]
    np.testing.assert_allclose(mni_to_talairach(point, name), expected, rtol=0, atol=1e-9)


@pytest.mark.parametrize("point", POINTS)
@pytest.mark.parametrize("name", LANCASTER)
def test_lancaster_2007_inverse_returns_the_point_from_its_product_by_hand(name, point):
    talairach = [float(value) for value in exact(LANCASTER[name], point)]
    np.testing.assert_allclose(talairach_to_mni(talairach, name), point, rtol=0, atol=1e-9)


@pytest.mark.parametrize("point", [*POINTS, (10, 12, 14), (30, -70, 0), (0, 50, -1)])
def test_brett_1999_there_and_back_equals_the_two_matrices_by_hand(point):
    talairach = [float(value) for value in brett(point)]
    np.testing.assert_allclose(mni_to_talairach(point, "piecewise"), talairach, rtol=0, atol=1e-9)
    np.testing.assert_allclose(talairach_to_mni(talairach, "piecewise"), point, rtol=0, atol=1e-9)


def test_brett_1999_example_point():
    """Brett's own example, (10, 12, 14) becomes (9.9000, 12.2696, 12.2826): value from memory."""
    np.testing.assert_allclose(mni_to_talairach((10, 12, 14), "piecewise"), (9.9000, 12.2696, 12.2826), atol=5e-5)


@given(x=st.integers(-80, 80), y=st.integers(-110, 80), z=st.integers(-70, 90))
def test_branch_rule_of_the_inverse_is_the_sign_of_the_mni_z(x, y, z):
    """Formula: upper branch if and only if 0.0485 y' + 0.9688 z' >= 0 (derived from Brett's rows)."""
    _, y_there, z_there = brett((x, y, z))
    assert (Fraction("0.0485") * y_there + Fraction("0.9688") * z_there >= 0) == (z >= 0)


def test_sign_of_talairach_z_alone_would_take_the_wrong_branch():
    """Far behind the origin just below the plane, z' is positive though MNI z is negative."""
    point = (0, -100, -3)
    there = [float(value) for value in brett(point)]
    assert there[2] > 0
    np.testing.assert_allclose(talairach_to_mni(there, "piecewise"), point, rtol=0, atol=1e-9)
