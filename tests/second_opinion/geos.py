"""Areas of unions of moves of a disc, by GEOS.

Reads cases as JSON from standard input and prints their areas. A case has a radius, lines as
[x0, y0, x1, y1] and arcs as [center x, center y, radius, start angle, sweep]. The disc along a line is a
buffer; along an arc it is the sector between two circles and the discs at both ends. Every circle has
8000 chords, inscribed.
"""

import json
import math
import sys

from shapely import LineString, Point, Polygon, unary_union

QUADRANT = 2000


def circle(x, y, radius, start, sweep):
    count = max(2, math.ceil(abs(sweep) * QUADRANT / (0.5 * math.pi)))
    angles = [start + sweep * k / count for k in range(count + 1)]
    return [(x + radius * math.cos(a), y + radius * math.sin(a)) for a in angles]


def along_arc(x, y, size, start, sweep, radius):
    outer, inner = size + radius, size - radius
    ends = [
        Point(x + size * math.cos(a), y + size * math.sin(a)).buffer(radius, quad_segs=QUADRANT)
        for a in (start, start + sweep)
    ]
    if abs(sweep) >= 2 * math.pi - 1e-12:
        holes = [circle(x, y, inner, 0.0, 2 * math.pi)] if inner > 0 else []
        return [Polygon(circle(x, y, outer, 0.0, 2 * math.pi), holes)]
    back = circle(x, y, inner, start + sweep, -sweep) if inner > 0 else [(x, y)]
    return [Polygon(circle(x, y, outer, start, sweep) + back), *ends]


def area(case):
    radius = case["radius"]
    shapes = []
    for x0, y0, x1, y1 in case["lines"]:
        line = LineString([(x0, y0), (x1, y1)]) if (x0, y0) != (x1, y1) else Point(x0, y0)
        shapes.append(line.buffer(radius, quad_segs=QUADRANT))
    for x, y, size, start, sweep in case["arcs"]:
        shapes += along_arc(x, y, size, start, sweep, radius)
    return unary_union(shapes).area


print(json.dumps([area(case) for case in json.load(sys.stdin)]))
