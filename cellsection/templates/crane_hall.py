"""The data of the filled example: a workshop strengthens a girder of its crane hall."""

from __future__ import annotations

from datetime import date

from cellsection.templates.content import Content

__all__ = ["crane_hall"]


def crane_hall() -> Content:
    """The girder: a rolled I from the first building, now with a channel as its cap and a plate underneath."""
    return Content(
        title="Crane girder, strengthened",
        project="Crane hall 2, hoist from 8 t to 12.5 t",
        member="Crane girder G4, axis 3 to 4, span 7.20 m",
        prepared_by="R. K.",
        checked_by="M. T.",
        issued=date(2026, 11, 18),
        revision="B",
        parts=(
            {
                "part": "rolled I 500 × 200",
                "shape": "I",
                "b": 200,
                "h": 500,
                "tw": 10.2,
                "tf": 16,
                "r": 21,
                "x": 0,
                "y": 0,
                "datum": "bottom",
            },
            {
                "part": "cap, channel 270 × 95",
                "shape": "channel",
                "b": 95,
                "h": 270,
                "tw": 7.5,
                "tf": 13.5,
                "r": 15,
                "x": 0,
                "y": 507.5,
                "turn": -90,
                "datum": "left",
            },
            {"part": "bottom plate", "shape": "rectangle", "b": 240, "h": 15, "x": 0, "y": 0, "datum": "top"},
            {
                "part": "rail clip hole, left",
                "shape": "rectangle",
                "b": 22,
                "h": 23.5,
                "x": -65,
                "y": 507.5,
                "sign": -1,
                "datum": "top",
            },
            {
                "part": "rail clip hole, right",
                "shape": "rectangle",
                "b": 22,
                "h": 23.5,
                "x": 65,
                "y": 507.5,
                "sign": -1,
                "datum": "top",
            },
        ),
        gap=22,  # a hole parts the flange in its own plane, not along the girder
        notes=(
            "G4 was built for an 8 t crane. The new hoist lifts 12.5 t: it gets a channel as a cap and a plate below.",
            "The cap stands with its web on the top flange. The plate is 20 mm wider than the flange at each side, "
            "so that its welds are laid from above.",
            "Rail clip holes d 22 pass through cap and flange and are taken off over both thicknesses.",
            "Not covered here: lateral-torsional buckling, wheel pressure on the web, fatigue, welds, and "
            "the stress that is locked in before strengthening.",
        ),
    )
