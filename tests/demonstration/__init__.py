"""Builds the demonstration dossiers in `samples/`: `python -m tests.demonstration.build`."""
