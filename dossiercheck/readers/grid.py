"""Small helpers for what is laid out in rows and columns, and for numbers in attributes."""

from __future__ import annotations


def column_letter(index: int) -> str:
    """Spreadsheet letters of a 0-based column: 0 -> A, 25 -> Z, 26 -> AA."""
    letters = ""
    index += 1
    while index:
        index, rest = divmod(index - 1, 26)
        letters = chr(65 + rest) + letters
    return letters


def column_index(letters: str) -> int:
    """The 0-based column of spreadsheet letters; the inverse of `column_letter`."""
    index = 0
    for letter in letters.upper():
        index = index * 26 + ord(letter) - 64
    return index - 1


def number_of(text: str, default: int) -> int:
    """The number that up to twelve ASCII digits write, the default for any other text.

    `str.isdigit` takes raised digits that `int` does not, and `int` refuses thousands of digits.
    """
    return int(text) if text.isascii() and text.isdigit() and len(text) <= 12 else default
