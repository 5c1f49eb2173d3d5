"""What general PDF programs say of a memo, as JSON.

python look.py MEMO.pdf    the attached record's SHA-256 (pikepdf), the hashes of all attached files,
                           what outloud and pdfua object to
"""

import hashlib
import json
import subprocess
import sys
from pathlib import Path

import pikepdf


def attached(path):
    with pikepdf.open(path) as pdf:
        return {name: hashlib.sha256(spec.get_file().read_bytes()).hexdigest() for name, spec in pdf.attachments.items()}


def run(*command):
    done = subprocess.run(command, capture_output=True, text=True)
    return {"code": done.returncode, "said": done.stdout + done.stderr}


def main():
    memo = sys.argv[1]
    programs = Path(sys.executable).parent
    print(
        json.dumps(
            {
                "attached": attached(memo),
                "outloud": run(programs / "outloud", memo),
                "pdfua": run(programs / "pdfua", "check", memo),
            }
        )
    )


main()
