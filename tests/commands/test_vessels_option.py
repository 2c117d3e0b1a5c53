"""``soplint worksheet --vessels`` shows the steps of each vessel."""

import subprocess
import sys

TEXT = """5 Tris buffer, 50 mmol/L, pH 8.0 at 25 °C, 1000 mL
5.1 Dissolve 6.06 g of Tris base in 900 mL of water.
5.2 Adjust to pH 8.0 at 25 °C with 1 mol/L hydrochloric acid.
5.3 Make up to 1000 mL with water.
"""


def soplint(*words, cwd):
    return subprocess.run(
        [sys.executable, "-m", "soplint", "worksheet", *words],
        cwd=cwd, capture_output=True, text=True, encoding="utf-8",
    )  # fmt: skip


def test_step_table(tmp_path):
    (tmp_path / "a.sop").write_text(TEXT, encoding="utf-8")
    for words in (("--vessels", "a.sop"), ("a.sop", "--vessels")):
        done = soplint(*words, cwd=tmp_path)
        assert done.returncode == 0 and not done.stderr
        assert "made up to 1000 mL" in done.stdout
        assert "8.00" in done.stdout


def test_switch_takes_no_value_and_no_other_form(tmp_path):
    (tmp_path / "a.sop").write_text(TEXT, encoding="utf-8")
    assert soplint("--vessels=yes", "a.sop", cwd=tmp_path).returncode == 2
    assert soplint("--vessels", "--as", "csv", "a.sop", cwd=tmp_path).returncode == 2
    assert soplint("--vessels", "missing.sop", cwd=tmp_path).returncode == 2
