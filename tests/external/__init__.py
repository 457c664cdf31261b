"""The program against published values, public records and general-purpose libraries."""
