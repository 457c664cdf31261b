"""Optical rotations as printed. The forms are common practice; the values are invented."""

from __future__ import annotations

import pytest

from dossiercheck.language.rotation import Rotation, read_rotation


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        (
            "[α]D20 −23.4° (c 1.0, methanol)",
            Rotation("-", -23.4, -23.4, "589", "1.0", "methanol", "20"),
        ),
        (
            "[α]20D = +12.5 (c = 0.5, CHCl3)",
            Rotation("+", 12.5, 12.5, "589", "0.5", "chloroform", "20"),
        ),
        ("Specific rotation: -22° to -26°", Rotation("-", -26.0, -22.0)),
        ("between −22.0° and −26.0°", Rotation("-", -26.0, -22.0)),
        ("[α]₅₄₆ 12.0°", Rotation("", 12.0, 12.0, "546")),
        ("−23.4", Rotation("-", -23.4, -23.4)),
        ("0°", Rotation("", 0.0, 0.0)),
        ("-1° to +1°", Rotation("", -1.0, 1.0)),
        ("[α]D +20.1° ± 0.5°", Rotation("+", 20.1, 20.1, "589")),
        (
            "Specific rotation (water, 589 nm): +8,1°",
            Rotation("+", 8.1, 8.1, "589", "", "water"),
        ),
    ],
)
def test_forms(text: str, expected: Rotation) -> None:
    assert read_rotation(text) == expected


@pytest.mark.parametrize(
    "text",
    [
        "-5.0° (water) and +4.0° (methanol)",
        "[α]D = ±3°",
        "−5.0° (methanol and water)",
        "levorotatory",
        "to be measured at 20 °C",
        "",
    ],
)
def test_what_is_not_one_rotation_is_not_read(text: str) -> None:
    assert read_rotation(text) is None


def test_size_is_the_least_that_a_range_allows() -> None:
    assert Rotation("-", -26.0, -22.0).size == 22.0
    assert Rotation("", -1.0, 1.0).size == 0.0
