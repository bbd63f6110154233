"""Shapes of every word with random possible dimensions, and regions placed anywhere, for the property tests."""

from __future__ import annotations

from hypothesis import strategies as st

from cellsection.geometry import SHAPES, Region

__all__ = ["dimensions", "placements", "regions", "shape_regions"]

share = st.floats(0.05, 0.95)
radius = st.one_of(st.just(0.0), st.just(1.0), st.floats(0.05, 0.95))  # 0 for a sharp corner, 1 for all of the space
length = st.floats(1.0, 1000.0)


@st.composite
def dimensions(draw: st.DrawFn, word: str) -> dict[str, float]:
    """Possible dimensions of one shape."""
    b, h = draw(length), draw(length)
    size = {"b": b, "h": h}
    match word:
        case "rectangle" | "ellipse":
            return size
        case "triangle":
            return size | {"a": b * draw(st.floats(-1.0, 2.0))}
        case "trapezoid":
            return size | {"b2": draw(length), "a": b * draw(st.floats(-1.0, 2.0))}
        case "circle" | "half circle":
            return {"d": b}
        case "sector" | "segment":
            return {"r": b, "angle": draw(st.floats(1.0, 359.0))}
        case "tube":
            return {"d": b, "t": b * draw(share) / 2}
        case "fillet":
            return {"r": b}
        case "plate":
            return {"x": -b, "y": h, "x2": h, "y2": b, "t": draw(length)}
        case "box":
            size |= {"tw": b * draw(share) / 2, "tf": h * draw(share) / 2}
            ri = draw(radius) * min(b - 2 * size["tw"], h - 2 * size["tf"]) / 2
            # An outside radius of at most ri + the thinner wall leaves that wall at the corners.
            ro = min(ri + min(size["tw"], size["tf"]), min(b, h) / 2)
            return size | {"ri": ri, "ro": max(ro, ri)}
        case "I":
            b2 = b * draw(st.floats(0.5, 2.0))
            size |= {"tw": min(b, b2) * draw(share), "b2": b2}
            size |= {"tf": h * draw(share) / 2, "tf2": h * draw(share) / 2}
            room = min(min(b, b2) - size["tw"], h - size["tf"] - size["tf2"]) / 2
            return size | {"r": draw(radius) * room}
        case "tee":
            size |= {"tw": b * draw(share), "tf": h * draw(share)}
            return size | {"r": draw(radius) * min((b - size["tw"]) / 2, h - size["tf"])}
        case "channel":
            size |= {"tw": b * draw(share), "tf": h * draw(share) / 3}
            slope = draw(radius) * min(0.5, 1.8 * size["tf"] / b, 0.9 * (h / 2 - size["tf"]) / b)
            tip, root = size["tf"] - slope * b / 2, size["tf"] + slope * (b / 2 - size["tw"])
            r2 = draw(share) * min(tip, (b - size["tw"]) / 2)
            return size | {"slope": slope, "r2": r2, "r": draw(share) * 0.8 * min(h / 2 - root, (b - size["tw"]) / 2)}
        case "angle":
            t = min(b, h) * draw(share)
            r2 = draw(radius) * min(t, (min(b, h) - t) / 2)
            return size | {"t": t, "r2": r2, "r": draw(radius) * (min(b, h) - t - r2)}
        case "zed" | "lipped channel":
            t = min(b, h) * draw(share) / 4
            c = (h / 2) * draw(st.floats(0.3, 0.9))
            t = min(t, c / 2)
            r = draw(radius) * min(h / 2 - t, b / 2 - t, c - t)
            return size | {"t": t, "c": c, "r": r}
    raise AssertionError(word)


@st.composite
def shape_regions(draw: st.DrawFn) -> Region:
    """Any shape in its own axes."""
    word = draw(st.sampled_from(sorted(SHAPES)))
    return SHAPES[word].build(**draw(dimensions(word)))


angles = st.one_of(st.sampled_from([0.0, 30.0, 45.0, 90.0, -90.0, 180.0]), st.floats(-360.0, 360.0))
placements = st.tuples(st.floats(-1e3, 1e3), st.floats(-1e3, 1e3), angles, st.booleans())


@st.composite
def regions(draw: st.DrawFn) -> Region:
    """Any shape, turned, moved, perhaps mirrored."""
    region = draw(shape_regions())
    x, y, turn, mirrored = draw(placements)
    region = region.turned(turn).moved(x, y)
    return region.mirrored() if mirrored else region
