"""Checks of the Dockerfile that need no container engine: every COPY source exists and is let through by
.dockerignore, the process does not run as root, and the health check and command name real subcommands."""

import pathlib
import re
import subprocess
import sys

faults = []
lines = pathlib.Path("Dockerfile").read_text().replace("\\\n", " ").splitlines()
ignore = pathlib.Path(".dockerignore").read_text().split()


def let_through(source):
    return any(rule == "!" + source.split("/")[0] for rule in ignore)


for line in lines:
    words = line.split()
    if words[:1] == ["COPY"] and not words[1].startswith("--from"):
        for source in words[1:-1]:
            if not pathlib.Path(source).exists():
                faults.append(f"COPY source does not exist: {source}")
            if not let_through(source):
                faults.append(f"COPY source is kept out by .dockerignore: {source}")
    if words[:1] == ["FROM"] and not re.search(r":\d", words[1]):
        faults.append(f"base without a version: {words[1]}")

users = [line.split()[1] for line in lines if line.startswith("USER ")]
if not users or not re.fullmatch(r"[1-9]\d*:[1-9]\d*", users[-1]):
    faults.append(f"the last USER is not a number above zero: {users}")

known = subprocess.run([sys.argv[1], "--help"], capture_output=True, text=True, check=True).stdout
for subcommand in re.findall(r'CMD \["(?:dipcast", ")?(\w+)"', "\n".join(lines)):
    if not re.search(rf"^\s+{subcommand}\b", known, re.MULTILINE):
        faults.append(f"the image calls `dipcast {subcommand}`, which does not exist")

print("\n".join(faults) or "Dockerfile: sources, user and subcommands are in order")
sys.exit(bool(faults))
