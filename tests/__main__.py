"""``python -m tests``: format, lint, types and tests in one go; arguments go to pytest."""

import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).parents[1]
STEPS = {
    "format": ["ruff", "format", "--check", "."],
    "lint": ["ruff", "check", "."],
    "types": ["mypy"],
}


def main() -> int:
    failed = []
    for name, command in STEPS.items():
        print(f"== {name}", flush=True)
        if subprocess.run([sys.executable, "-m", *command], cwd=ROOT, check=False).returncode:
            failed.append(name)
    print("== tests", flush=True)
    if subprocess.run([sys.executable, "-m", "pytest", *sys.argv[1:]], cwd=ROOT, check=False).returncode:
        failed.append("tests")
    if failed:
        print(f"Not clean: {', '.join(failed)}", file=sys.stderr)
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main())
