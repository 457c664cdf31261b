"""Vectors in space as triples."""

from __future__ import annotations

from math import sqrt

Vector = tuple[float, float, float]


def minus(one: Vector, two: Vector) -> Vector:
    """One - two."""
    return one[0] - two[0], one[1] - two[1], one[2] - two[2]


def dot(one: Vector, two: Vector) -> float:
    """Scalar product."""
    return one[0] * two[0] + one[1] * two[1] + one[2] * two[2]


def cross(one: Vector, two: Vector) -> Vector:
    """Vector product."""
    return (
        one[1] * two[2] - one[2] * two[1],
        one[2] * two[0] - one[0] * two[2],
        one[0] * two[1] - one[1] * two[0],
    )


def unit(vector: Vector) -> Vector:
    """The vector at length one; the null vector stays."""
    length = sqrt(dot(vector, vector))
    return (vector[0] / length, vector[1] / length, vector[2] / length) if length else vector


def sine(along: Vector, other: Vector) -> float:
    """Signed sine of the angle in the plane of the drawing from one unit vector to another."""
    return along[0] * other[1] - along[1] * other[0]


def volume(one: Vector, two: Vector, three: Vector, four: Vector) -> float:
    """Six times the signed volume of a tetrahedron: positive where, seen from `one`, the others
    follow counter-clockwise."""
    return dot(minus(one, two), cross(minus(three, two), minus(four, two)))
