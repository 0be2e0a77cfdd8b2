"""Checks that every locked dependency carries a licence this project accepts, and comes from the registry.

A stand-in for cargo-deny where that is not installed: reads `cargo metadata`, needs nothing else.
"""

import json
import subprocess
import sys

ACCEPTED = {
    "MIT", "Apache-2.0", "Apache-2.0 WITH LLVM-exception", "BSD-2-Clause", "BSD-3-Clause", "ISC", "Zlib",
    "Unicode-3.0", "Unlicense", "BSL-1.0", "CC0-1.0", "0BSD", "MIT-0",
}


def alternatives(expression):
    """The licence sets of an SPDX expression, any one of which is enough (OR of ANDs; no nesting deeper than one)."""
    for part in expression.replace("/", " OR ").replace("(", " ").replace(")", " ").split(" OR "):
        yield {word.strip() for word in part.split(" AND ")}


def main():
    text = subprocess.run(
        ["cargo", "metadata", "--format-version", "1", "--locked"], check=True, capture_output=True, text=True
    ).stdout
    bad = []
    packages = [p for p in json.loads(text)["packages"] if p["name"] != "truebore"]
    for package in packages:
        licence = package.get("license") or ""
        name = f"{package['name']} {package['version']}"
        if not any(needed <= ACCEPTED for needed in alternatives(licence)):
            bad.append(f"{name}: licence '{licence}'")
        if not (package.get("source") or "").startswith("registry+"):
            bad.append(f"{name}: source {package.get('source')}")
    if bad:
        print("\n".join(bad))
        return 1
    print(f"{len(packages)} dependencies, all from the registry, all with an accepted licence")
    return 0


if __name__ == "__main__":
    sys.exit(main())
