"""The command line as it is called: one job or many, files or standard input, faults on standard error, status 2."""

import json
import pathlib
import subprocess
import sys

import pytest

import pycore
from tests.core.sample_jobs import sample

pytestmark = pytest.mark.native
HOUSE = pathlib.Path(pycore.__file__).parent.parent


def call(*arguments, given=None):
    return subprocess.run([sys.executable, "-m", "pycore", *map(str, arguments)], cwd=HOUSE, input=given, capture_output=True, text=True,
                          encoding="utf-8", timeout=60)


@pytest.fixture
def job_file(tmp_path):
    path = tmp_path / "chisel.json"
    path.write_text(json.dumps(sample()), encoding="utf-8")
    return path


def test_text_is_the_default(job_file):
    done = call(job_file)
    assert done.returncode == 0 and not done.stderr
    assert "Cold chisel" in done.stdout and "790" in done.stdout and "<" not in done.stdout.replace("< ", "")


def test_json(job_file):
    done = call(job_file, "--format", "json", "--date", "2026-12-01")
    made = json.loads(done.stdout)
    assert done.returncode == 0 and made["schema"] == "quenchwright.plan/1" and made["date"] == "2026-12-01"


def test_html(job_file):
    done = call(job_file, "--format", "html")
    assert done.returncode == 0 and done.stdout.lower().startswith("<!doctype html>")


@pytest.mark.parametrize(("name", "start"), [("out.html", "<!doctype html>"), ("out.json", "{"), ("out.txt", "")])
def test_output_file_names_its_format(job_file, tmp_path, name, start):
    out = tmp_path / name
    done = call(job_file, "-o", out)
    assert done.returncode == 0 and not done.stdout
    text = out.read_text(encoding="utf-8")
    assert text.lower().startswith(start) and text.endswith("\n") and "Cold chisel" in text


def test_a_saved_sheet_is_a_job_too(job_file, tmp_path):
    sheet = tmp_path / "sheet.html"
    assert call(job_file, "-o", sheet).returncode == 0
    again, first = (json.loads(call(f, "--format", "json", "--date", "2026-12-01").stdout) for f in (sheet, job_file))
    assert again == first


def test_standard_input(job_file):
    done = call("-", "--format", "json", given=json.dumps(sample()))
    assert json.loads(done.stdout)["title"] == "Cold chisel"


def test_several_files_give_a_line_each(job_file, tmp_path):
    other = tmp_path / "punch.json"
    other.write_text(json.dumps(sample("punch")), encoding="utf-8")
    done = call(job_file, other)
    lines = [json.loads(line) for line in done.stdout.splitlines()]
    assert [line["title"] for line in lines] == ["Cold chisel", "Blanking punch"] and done.returncode == 0


def test_json_lines_keep_their_place(tmp_path):
    """Good, faulty, broken, good: four lines out in the order in, faults named, status 2."""
    path = tmp_path / "jobs.jsonl"
    path.write_text("\n".join([json.dumps(sample()), json.dumps(sample(quantity=-1)), "{broken", json.dumps(sample("punch"))]) + "\n", encoding="utf-8")
    done = call(path)
    lines = [json.loads(line) for line in done.stdout.splitlines()]
    assert done.returncode == 2 and len(lines) == 4
    assert lines[0]["title"] == "Cold chisel" and lines[3]["title"] == "Blanking punch"
    assert lines[1]["errors"][0]["path"] == "quantity" and lines[2]["errors"]
    assert ":2: quantity" in done.stderr and ":3:" in done.stderr


def test_json_lines_from_standard_input():
    done = call("-", given="\n\n".join(json.dumps(sample(n)) for n in ("cold chisel", "leaf spring")))
    assert [json.loads(line)["title"] for line in done.stdout.splitlines()] == ["Cold chisel", "Leaf spring"]


def test_one_job_by_standard_input_is_one_line():
    good = call("-", "--format", "json", given=json.dumps(sample()))
    bad = call("-", "--format", "json", given=json.dumps(sample(quantity=-1)))
    assert len(good.stdout.splitlines()) == 1 and json.loads(good.stdout)["title"] == "Cold chisel"
    assert json.loads(bad.stdout)["errors"][0]["path"] == "quantity" and bad.returncode == 2


def test_json_lines_of_one_line(tmp_path):
    path = tmp_path / "jobs.jsonl"
    path.write_text(json.dumps(sample(quantity=-1)) + "\n", encoding="utf-8")
    done = call(path)
    assert "errors" in json.loads(done.stdout) and done.returncode == 2


def test_a_list_of_jobs():
    done = call("-", given=json.dumps([sample(), sample("punch")]))
    assert len(done.stdout.splitlines()) == 2 and done.returncode == 0


def test_faults_go_to_standard_error():
    done = call("-", given=json.dumps(sample(steel__grade="nope", quantity=-1)))
    assert done.returncode == 2 and not done.stdout
    assert "steel.grade" in done.stderr and "quantity" in done.stderr and "Traceback" not in done.stderr


@pytest.mark.parametrize("given", ["", "{", "hello", "[1, 2", "null", "5", '{"quantity": NaN}', "[" * 5000])
def test_what_is_no_job(given):
    done = call("-", given=given)
    assert done.returncode == 2 and done.stderr and "Traceback" not in done.stderr


def test_a_missing_file(tmp_path):
    done = call(tmp_path / "nowhere.json")
    assert done.returncode == 2 and "nowhere.json" in done.stderr and "Traceback" not in done.stderr


def test_a_faulty_file_among_good_ones(job_file, tmp_path):
    done = call(tmp_path / "nowhere.json", job_file)
    lines = [json.loads(line) for line in done.stdout.splitlines()]
    assert done.returncode == 2 and "errors" in lines[0] and lines[1]["title"] == "Cold chisel"


def test_several_jobs_cannot_be_one_sheet(job_file):
    done = call(job_file, job_file, "--format", "html")
    assert done.returncode == 2 and "JSON" in done.stderr


def test_not_utf8(tmp_path):
    path = tmp_path / "odd.json"
    path.write_bytes(b"\xff\xfe\x00{")
    done = call(path)
    assert done.returncode == 2 and "Traceback" not in done.stderr


def test_version():
    assert pycore.__version__ in call("--version").stdout


def test_a_character_that_cannot_be_written_spoils_one_line_only():
    """Half a surrogate pair is legal JSON and no text: a fault or a cleaned title, never a traceback over all the jobs."""
    given = "\n".join(json.dumps(job) for job in (sample(), sample(title="\ud800 chisel"), sample(steel__grade="\ud800"), sample("punch")))
    done = call("-", "--format", "json", given=given)
    assert "Traceback" not in done.stderr and len(done.stdout.splitlines()) == 4
