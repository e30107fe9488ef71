import ast
import subprocess
import sys
from pathlib import Path


def test_help_imports_next_to_nothing() -> None:
    code = (
        "import sys\nfrom rcrules.cli import main\ntry: main(['--help'])\nexcept SystemExit: pass\n"
        "print(sorted(sys.modules), file=sys.stderr)"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    loaded = set(ast.literal_eval(done.stderr))
    assert loaded.isdisjoint({"numpy", "lxml", "networkx", "pint", "rich", "json", "tomllib", "rcrules.findings"})
    assert loaded.isdisjoint({"dataclasses", "pathlib", "rcrules.errors"})


def test_check_does_not_import_what_it_does_not_need(board: Path) -> None:
    code = "import sys\nfrom rcrules.cli import main\nmain(['check'])\nprint(sorted(sys.modules), file=sys.stderr)"
    done = subprocess.run([sys.executable, "-c", code], cwd=board, capture_output=True, text=True, check=True)
    assert set(ast.literal_eval(done.stderr)).isdisjoint({"pint", "rich"})
