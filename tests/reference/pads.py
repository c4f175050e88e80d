"""Regenerates pads.json: integrals over pads by quadrature, sharing no code and no formula with the service.

Sectors and round pads: two-dimensional quadrature in polar coordinates about the disc axis (mpmath, 30 digits).
Polygons: Gauss-Legendre over triangles of an ear clipping, subdivided until two orders agree (numpy).
Needs numpy and mpmath. Deterministic: no random numbers.
"""

import json
import pathlib

import mpmath as mp
import numpy as np

mp.mp.dps = 30


def sector(inner, outer, degrees):
    """Strips of constant radius: the sector spans the same angle at every radius."""
    half = mp.radians(mp.mpf(degrees)) / 2
    return radial(lambda r: half, mp.mpf(inner), mp.mpf(outer))


def round_pad(radius, center):
    """Strips of constant radius: the circle spans 2 acos((r^2 + e^2 - R^2)/(2 r e)) at the radius r."""
    radius, center = mp.mpf(radius), mp.mpf(center)

    def half_angle(r):
        cosine = (r * r + center * center - radius * radius) / (2 * r * center)
        return mp.acos(min(mp.mpf(1), max(mp.mpf(-1), cosine)))

    return radial(half_angle, center - radius, center + radius)


def radial(half_angle, low, high):
    points = mp.linspace(low, high, 5)

    def over(weight):
        return mp.quad(weight, points)

    return {
        "area": over(lambda r: 2 * half_angle(r) * r),
        "area_per_radius": over(lambda r: 2 * half_angle(r)),
        "radius_moment": over(lambda r: 2 * half_angle(r) * r * r),
        "x_moment": over(lambda r: 2 * mp.sin(half_angle(r)) * r * r),
        "y_moment": mp.mpf(0),
        "x_per_radius": over(lambda r: 2 * mp.sin(half_angle(r)) * r),
        "y_per_radius": mp.mpf(0),
    }


def cross(a, b):
    return a[0] * b[1] - a[1] * b[0]


def ears(points):
    """Triangles of a simple counterclockwise polygon."""
    rest = [np.array(p, dtype=float) for p in points]
    while len(rest) > 3:
        for i in range(len(rest)):
            a, b, c = rest[i - 1], rest[i], rest[(i + 1) % len(rest)]
            if cross(b - a, c - b) <= 0:
                continue
            others = [p for p in rest if p is not a and p is not b and p is not c]
            inside = [
                min(cross(b - a, p - a), cross(c - b, p - b), cross(a - c, p - c)) >= 0
                for p in others
            ]
            if not any(inside):
                yield a, b, c
                del rest[i]
                break
        else:
            raise ValueError("no ear: not a simple polygon")
    yield tuple(rest)


def over_triangle(corners, order, parts):
    """Collapsed Gauss-Legendre rule on parts x parts cells; returns the seven integrals."""
    nodes, weights = np.polynomial.legendre.leggauss(order)
    cells = np.arange(parts)
    grid = ((cells[:, None] + (nodes[None, :] + 1) / 2) / parts).ravel()
    weight = np.tile(weights / (2 * parts), parts)
    u, v = np.meshgrid(grid, grid, indexing="ij")
    a, b, c = corners
    x = a[0] + u * (b[0] - a[0]) + u * v * (c[0] - b[0])
    y = a[1] + u * (b[1] - a[1]) + u * v * (c[1] - b[1])
    d_area = np.outer(weight, weight) * u * cross(b - a, c - a)
    r = np.hypot(x, y)
    return np.array([(d_area * f).sum() for f in (np.ones_like(r), 1 / r, r, x, y, x / r, y / r)])


NAMES = [
    "area",
    "area_per_radius",
    "radius_moment",
    "x_moment",
    "y_moment",
    "x_per_radius",
    "y_per_radius",
]


def polygon(points):
    doubled = sum(cross(p, points[(i + 1) % len(points)]) for i, p in enumerate(points))
    turning = points if doubled > 0 else points[::-1]
    coarse, fine = (
        sum(over_triangle(t, order, 4) for t in ears(turning)) for order in (24, 32)
    )
    assert np.allclose(coarse, fine, rtol=1e-12, atol=1e-18), (coarse, fine)
    return dict(zip(NAMES, fine))


SECTORS = [
    ("0.1", "0.15", "60"),
    ("0.0984250", "0.1397", "108"),
    ("0.05", "0.2", "200"),
    ("0.149", "0.15", "3"),
    ("0.02", "0.3", "330"),
]
ROUNDS = [
    ("0.0001", "0.2"),
    ("0.0127", "0.0508"),
    ("0.03", "0.1"),
    ("0.05", "0.1"),
    ("0.09", "0.1"),
    ("0.0999", "0.1"),
    ("0.0999999", "0.1"),
]
OUTLINES = [
    [[0.08, -0.03], [0.12, -0.042], [0.12, 0.042], [0.08, 0.03]],
    [[0.08, 0.03], [0.12, 0.042], [0.12, -0.042], [0.08, -0.03]],
    [[0.1, 0.0], [0.13, 0.01], [0.11, 0.05]],
    # One side lies on a line through the axis.
    [[0.05, 0.05], [0.1, 0.1], [0.04, 0.12]],
    # Reaches around the axis in the shape of a C.
    [
        [0.06, -0.10],
        [0.11, 0.0],
        [0.06, 0.10],
        [-0.06, 0.10],
        [-0.11, 0.0],
        [-0.09, 0.0],
        [-0.045, 0.07],
        [0.045, 0.07],
        [0.08, 0.0],
        [0.045, -0.07],
    ],
    # On the other side of the axis, turned clockwise.
    [[-0.2, 0.05], [-0.1, 0.03], [-0.1, -0.06], [-0.15, -0.01], [-0.21, -0.04]],
]


def main():
    cases = [
        {"shape": "annular_sector", "inner_radius": float(i), "outer_radius": float(o), "degrees": float(d)}
        | {"integrals": {k: float(v) for k, v in sector(i, o, d).items()}}
        for i, o, d in SECTORS
    ]
    cases += [
        {"shape": "round", "radius": float(r), "center_radius": float(e)}
        | {"integrals": {k: float(v) for k, v in round_pad(r, e).items()}}
        for r, e in ROUNDS
    ]
    cases += [
        {"shape": "outline", "points": p}
        | {"integrals": {k: float(f"{v:.14g}") for k, v in polygon(p).items()}}
        for p in OUTLINES
    ]
    target = pathlib.Path(__file__).with_name("pads.json")
    lines = ",\n".join("  " + json.dumps(case) for case in cases)
    target.write_text('{"cases": [\n' + lines + "\n]}\n", encoding="ascii")


if __name__ == "__main__":
    main()
