"""Runs every block of README.md that is marked ```sh run, and compares what it prints with the block that follows.

In the expected block `...` stands for anything. The address in the README is replaced by that of the server under
test; `dipcast` is the release build. A block with no expected block after it must only succeed.
"""

import os
import pathlib
import re
import subprocess
import sys
import tempfile

ADDRESS = "127.0.0.1:8080"
BLOCK = re.compile(r"^```(.*?)\n(.*?)^```\n(?:\s*^```(?:text|json|csv)\n(.*?)^```\n)?", re.MULTILINE | re.DOTALL)


def pattern(expected):
    """The expected text as a pattern: spaces weigh nothing, `...` matches anything."""
    pieces = [r"\s*".join(re.escape(word) for word in piece.split()) for piece in expected.split("...")]
    return re.compile(r".*?".join(r"\s*" + piece + r"\s*" for piece in pieces) + r"\Z", re.DOTALL)


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
            wrong = done.returncode != 0 or (expected and not pattern(expected).match(printed))
            if wrong:
                failed += 1
                print(f"--- README block, exit code {done.returncode}:\n{block}--- printed:\n{printed[:3000]}\n--- expected:\n{expected}")
    print(f"README examples: {ran} run, {failed} failed")
    return 1 if failed or ran == 0 else 0


if __name__ == "__main__":
    sys.exit(main(*sys.argv[1:]))
