"""Upright pyramids, by rays through the height field of a whole square array in three dimensions.

Rays fall along the pyramids' axes on an even grid over one cell; each is followed from facet to
facet, by solving for the nearest of all planes that it crosses within their triangles.  No use is
made of grooves or of likeness at every scale.  Reflectances are Fresnel's, for light polarised
along and across a row, carried as Jones vectors.  P. Campbell, M. A. Green, J. Appl. Phys. 62,
243-249 (1987) is the method's source; M. Born, E. Wolf, Principles of Optics, 1.5, Fresnel's.
"""

import numpy as np

from common import document

TOLERANCE = 1e-9

GRID = 144
REACH = 3


def facets(angle):
    """(normal, apex) of all facets of the pyramids about the cell: unit base, apex over its middle."""
    height = 0.5 * np.tan(angle)
    found = []
    for i in range(-REACH, REACH + 1):
        for j in range(-REACH, REACH + 1):
            for nx, ny in [(1, 0), (-1, 0), (0, 1), (0, -1)]:
                normal = np.array([nx * np.sin(angle), ny * np.sin(angle), np.cos(angle)])
                found.append((normal, np.array([i, j, height])))
    return found


def meet(origin, direction, planes, height):
    """The nearest facet in front of a ray: (distance, normal)."""
    best = None
    for normal, apex in planes:
        slope = direction @ normal
        if slope >= -1e-12:
            continue
        distance = ((apex - origin) @ normal) / slope
        if distance <= 1e-9 or (best is not None and distance >= best[0]):
            continue
        hit = origin + distance * direction - apex
        below = -hit[2] / height
        side = hit[1] if abs(normal[0]) > 0 else hit[0]
        if -1e-12 <= below <= 1 + 1e-12 and abs(side) <= 0.5 * below + 1e-12:
            best = (distance, normal)
    return best


def fresnel(n, cosine):
    inner = np.sqrt(1 - (1 - cosine**2) / n**2 + 0j)
    s = (cosine - n * inner) / (cosine + n * inner)
    p = (n * cosine - inner) / (n * cosine + inner)
    return s, p


def trace(angle, n):
    """Shares of rays that come to a first, second, third ... facet, its angle, and R of all."""
    planes = facets(angle)
    height = 0.5 * np.tan(angle)
    reach, angles, reflected = {}, {}, 0.0
    # By symmetry the facet that looks to +x stands for all: its half of a row, y from 0 to x.
    count = 0
    for a in range(GRID):
        x = 0.5 * (a + 0.5) / GRID
        for b in range(0, GRID, 6):
            y = 0.5 * (b + 0.5) / GRID
            if y >= x:
                continue
            count += 1
            origin = np.array([x, y, height - x / 0.5 * height])
            ray, normal = np.array([0.0, 0.0, -1.0]), np.array([np.sin(angle), 0.0, np.cos(angle)])
            fields = [np.array([1, 0, 0], complex), np.array([0, 1, 0], complex)]
            order = 0
            while normal is not None and order < 40:
                order += 1
                cosine = -ray @ normal
                reach[order] = reach.get(order, 0) + 1
                angles[order] = float(np.arccos(min(cosine, 1.0)))
                across = np.cross(ray, normal)
                size = np.linalg.norm(across)
                across = across / size if size > 1e-9 else np.array([0.0, 1.0, 0.0])
                before = np.cross(across, ray)
                ray = ray + 2 * cosine * normal
                after = np.cross(across, ray)
                s, p = fresnel(n, cosine)
                fields = [s * (f @ across) * across + p * (f @ before) * after for f in fields]
                found = meet(origin, ray, planes, height)
                normal = None
                if found is not None:
                    origin, normal = origin + found[0] * ray, found[1]
            reflected += sum(np.sum(np.abs(f) ** 2) for f in fields) / 2
    shares = [reach[order] / count for order in sorted(reach)]
    return shares, [angles[order] for order in sorted(angles)], float(reflected / count)


def make():
    rows = []
    for degrees in [25.0, 38.0, 45.0, 50.0, 54.735610317245346, 58.0, 64.0]:
        for n in [[1.5, 0.0], [4.08, 0.028]]:
            shares, angles, reflectance = trace(np.radians(degrees), complex(*n))
            rows.append(
                {"facets_deg": degrees, "index": n, "shares": shares, "angles_rad": angles, "reflectance": reflectance}
            )
    content = {
        "about": "light along the axes of bare upright pyramids: rays that come to the k-th facet, R",
        "source": "rays through a square array in three dimensions (numpy), Fresnel's coefficients",
        "textures": rows,
    }
    return {"facets.json": document(content)}
