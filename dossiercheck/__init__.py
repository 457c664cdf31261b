"""Check a drug dossier: every drawing, name and stated chirality of a substance agrees."""

__version__ = "0.2.0"
