"""run() and what it gives: the result folder, asked from Python."""
import csv
import json
import pathlib
import re
import shutil
import subprocess

import numpy as np
import pytest

import rillclock
import support


@pytest.fixture(scope="module")
def result(town, tmp_path_factory):
    return rillclock.run(town / "study.toml", settings={"output.folder": str(tmp_path_factory.mktemp("run") / "result")})


def test_the_result_is_that_of_the_command_file_by_file(town, result):
    subprocess.run([support.COMMAND, "run", str(town / "study.toml"), "--quiet", "--replace"], check=True, capture_output=True)
    files = sorted(p.relative_to(result.folder) for p in result.folder.rglob("*") if p.is_file())
    assert len(files) > 30
    for file in files:
        assert (town / "result" / file).read_bytes() == (result.folder / file).read_bytes(), file


def test_figures_headlines_and_notices_are_those_of_result_json(result):
    kept = json.loads((result.folder / "result.json").read_text(encoding="utf-8"))
    assert result.figures == kept
    assert result.headlines == kept["headlines"] and len(result.headlines) == 4
    assert [(n.code, n.text, n.point or None, n.value, n.threshold) for n in result.notices] == [
        (n["notice"], n["text"], n["point"] or None, n["value"], n["threshold"]) for n in kept["notices"]]
    first = result.notices[0]
    assert first.effect_s == pytest.approx(kept["notices"][0]["effect_min"] * 60) and first.place == tuple(kept["notices"][0]["place"])


def test_tables_come_as_columns(result):
    with open(result.folder / "tables/outlets.csv", encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    assert result.columns("outlets") == list(rows[0])
    assert result.texts("outlets", "name") == [row["name"] for row in rows]
    times = result.numbers("outlets", "time_of_concentration_min")
    assert times.dtype == np.float64
    np.testing.assert_array_equal(times, [float(row["time_of_concentration_min"]) for row in rows])
    leads = result.numbers("outlets", "lead_min")
    np.testing.assert_array_equal(np.isnan(leads), [row["lead_min"] == "" for row in rows])
    assert np.isnan(leads).any() and not np.isnan(leads).all()


def test_rasters_come_as_arrays(result):
    minutes = result.raster("travel_time")
    assert minutes.shape == (600, 500) and minutes.dtype == np.float64
    weir = result.texts("outlets", "name").index("Weir") + 1
    catchment = result.raster("catchment")
    area_ha = np.count_nonzero(catchment == weir) * 4 / 1e4
    assert area_ha == pytest.approx(result.figures["outlets"][weir - 1]["own_area_m2"] / 1e4)


def test_a_sheet_is_that_which_explain_prints(result):
    printed = subprocess.run([support.COMMAND, "explain", str(result.folder), "Weir"], check=True, capture_output=True, text=True).stdout
    assert result.sheet("Weir").strip() == printed.strip()


def test_a_result_can_be_opened_again(result):
    again = rillclock.read_result(result.folder)
    assert again.folder == pathlib.Path(result.folder) and again.figures == result.figures


def test_settings_count_before_the_study_file(town, result, tmp_path):
    folder = tmp_path / "other"
    other = rillclock.run(town / "study.toml", settings={"output.folder": str(folder), "timing": {"sheet_limit": "50 ft"}, "report_units": "us"})
    assert other.folder == folder
    assert other.figures["parameters"]["sheet"]["limit_m"] == pytest.approx(15.24)
    assert "area_ac" in other.columns("outlets") and "area_ha" in result.columns("outlets")


def test_a_result_is_replaced_only_when_asked(town, tmp_path):
    settings = {"output.folder": str(tmp_path / "result")}
    rillclock.run(town / "study.toml", settings=settings)
    with pytest.raises(rillclock.InputError, match="already"):
        rillclock.run(town / "study.toml", settings=settings)
    rillclock.run(town / "study.toml", settings=settings, replace=True)


def test_a_run_that_is_stopped_leaves_nothing(town, tmp_path):
    with pytest.raises(rillclock.Stopped):
        rillclock.run(town / "study.toml", settings={"output.folder": str(tmp_path / "result")}, progress=lambda stage, done, total: stage != "writing rasters")
    assert list(tmp_path.iterdir()) == []


def test_errors_carry_the_command_s_sentence(town, tmp_path):
    shutil.copytree(town, tmp_path / "town", ignore=shutil.ignore_patterns("result"))
    study = tmp_path / "town/study.toml"
    study.write_text(study.read_text(encoding="utf-8").replace('"62 mm"', '"62"'), encoding="utf-8")
    said = subprocess.run([support.COMMAND, "run", str(study)], capture_output=True, text=True, check=False).stderr.strip()
    with pytest.raises(rillclock.InputError) as raised:
        rillclock.run(study)
    assert said == "rillclock: " + str(raised.value)


def test_a_study_is_a_name_or_a_dictionary():
    with pytest.raises(TypeError, match="os.PathLike"):
        rillclock.run(7)
    with pytest.raises(rillclock.InputError, match="gives no elevation"):
        rillclock.run({"terrain": {}})
    with pytest.raises(rillclock.InputError, match="the settings: unknown key|did you mean terrain.elevation"):
        rillclock.run({"terrain": {"elevatoin": "dem.tif"}})


@pytest.mark.parametrize("ask, says", [
    (lambda result: result.texts("outlet", "name"), "has no 'outlet' in its tables; did you mean outlets?"),
    (lambda result: result.numbers("outlets", "area"), "the table 'outlets' has no column 'area'"),
    (lambda result: result.numbers("outlets", "name"), "row 0 of the column 'name' of the table 'outlets'"),
    (lambda result: result.raster("travel_tim"), "did you mean travel_time?"),
    (lambda result: result.sheet("Wier"), "no point of '"),
    (lambda result: rillclock.read_result(result.folder / "tables"), "is not a result: it holds no result.json"),
    (lambda result: rillclock.read_result(result.folder / "nowhere"), "there is no folder"),
])
def test_what_a_result_does_not_have_is_refused_in_a_sentence(result, ask, says):
    with pytest.raises(rillclock.InputError) as raised:
        ask(result)
    assert says in str(raised.value)


def test_the_code_in_readme_runs(town, tmp_path, monkeypatch, capsys):
    shutil.copytree(town, tmp_path / "town", ignore=shutil.ignore_patterns("result"))
    monkeypatch.chdir(tmp_path)
    blocks = re.findall(r"(?ms)^```python\n(.*?)^```", (support.SOURCE / "README.md").read_text(encoding="utf-8"))
    assert blocks
    for block in blocks:
        exec(compile(block, "README.md", "exec"), {})
    assert "Weir" in capsys.readouterr().out
