"""What a user installs holds the packs and the demo board."""

import subprocess
import sys
import zipfile
from pathlib import Path

ROOT = Path(__file__).parent.parent


def test_the_wheel_holds_every_pack_demo_file_and_page_file(tmp_path: Path) -> None:
    """Built by the declared backend, the wheel lists each file of rules/ and rcrules/demo/."""
    command = [sys.executable, "-m", "build", "--wheel", "--no-isolation", "--outdir", str(tmp_path), str(ROOT)]
    subprocess.run(command, check=True, capture_output=True)
    (wheel,) = tmp_path.glob("*.whl")
    names = set(zipfile.ZipFile(wheel).namelist())
    wanted = {f"rcrules/rules/{path.name}" for path in (ROOT / "rules").glob("*.toml")}
    wanted |= {f"rcrules/demo/{path.name}" for path in (ROOT / "rcrules" / "demo").iterdir() if path.is_file()}
    page = ROOT / "rcrules" / "reports" / "_page"
    shown = [path.name for path in page.iterdir() if path.suffix in (".html", ".css", ".js")]
    wanted |= {f"rcrules/reports/_page/{name}" for name in shown}
    assert len(wanted) >= 13
    assert wanted <= names
