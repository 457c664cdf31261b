"""`python -m dossiercheck`."""

from dossiercheck.cli import main

main()
