"""Runs every block of README.md that is marked ```sh run, and compares what it prints with the block that follows.

In the expected block `...` stands for anything, and numbers may differ a little: they are there to be read. The address in the README is replaced by that of the server under
test; `dipcast` is the release build. A block with no expected block after it must only succeed.
"""

import math
import os
import pathlib
import re
import subprocess
import sys
import tempfile

TOLERANCE = 0.03
NUMBER = re.compile(r"(?<![\w.])\d+\.?\d*(?![\w.])")
ADDRESS = "127.0.0.1:8080"
BLOCK = re.compile(r"^```(.*?)\n(.*?)^```\n(?:\s*^```(?:text|json|csv)\n(.*?)^```\n)?", re.MULTILINE | re.DOTALL)


def agrees(expected, printed):
    """Word by word; `...` alone stands for any words, inside a word for any letters."""
    want, got = expected.split(), printed.split()
    return matches(want, got)


def matches(want, got):
    if not want:
        return not got
    if want[0] == "...":
        return any(matches(want[1:], got[skip:]) for skip in range(len(got) + 1))
    return bool(got) and same_word(want[0], got[0]) and matches(want[1:], got[1:])


def same_word(want, got):
    """Alike but for numbers, which may differ by TOLERANCE: they are there to be read, other tests hold them."""
    pieces = [NUMBER.sub("0", piece) for piece in (want, got)]
    if "..." in want:
        return re.fullmatch(".*".join(map(re.escape, want.split("..."))), got) is not None
    numbers = zip(map(float, NUMBER.findall(want)), map(float, NUMBER.findall(got)))
    return pieces[0] == pieces[1] and all(math.isclose(a, b, rel_tol=TOLERANCE, abs_tol=1e-9) for a, b in numbers)


def run(block, folder, environment):
    return subprocess.run(["bash", "-euo", "pipefail", "-c", block], cwd=folder, env=environment, text=True,
                          stdout=subprocess.PIPE, stderr=subprocess.STDOUT, timeout=60)


def main(readme, base, binary):
    root = pathlib.Path.cwd()
    here = base.removeprefix("http://")
    environment = os.environ | {"PATH": f"{pathlib.Path(binary).resolve().parent}:{os.environ['PATH']}"}
    ran = failed = 0
    with tempfile.TemporaryDirectory() as folder:
        for name in ("openapi", "tests"):
            os.symlink(root / name, pathlib.Path(folder, name))
        for kind, block, expected in BLOCK.findall(pathlib.Path(readme).read_text()):
            if kind.split() != ["sh", "run"]:
                continue
            ran += 1
            done = run(block.replace(ADDRESS, here), folder, environment)
            printed = done.stdout.replace(here, ADDRESS)
            wrong = done.returncode != 0 or (expected and not agrees(expected, printed))
            if wrong:
                failed += 1
                print(f"--- README block, exit code {done.returncode}:\n{block}--- printed:\n{printed[:3000]}\n--- expected:\n{expected}")
    print(f"README examples: {ran} run, {failed} failed")
    return 1 if failed or ran == 0 else 0


if __name__ == "__main__":
    sys.exit(main(*sys.argv[1:]))
