"""The verb `figure`: what it writes, in which sizes and formats, its films, and its messages."""

import os
import re
import shutil
import struct
import sys
import xml.etree.ElementTree

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

# A body of its own, so that the figures' units are those of one.
BODY = """\
title = "a small <body> & its lid"
[body]
radius = 2450
core_radius = 1225
gravity = 4.1
density = 3400
expansivity = 3e-5
conductivity = 3.5
heat_capacity = 1200
surface_temperature = 230
temperature_drop = 1400
reference_viscosity = 1e21
[shell]
geometry = "spherical-annulus"
[grid]
radial = 8
lateral = 32
[walls.inner]
temperature = 1630
[walls.outer]
temperature = 230
[viscosity.exponential]
thermal_contrast = 1e4
unity_at = 1630
[initial]
base = "boundary-layers"
interior = 1300
modes = [{ lateral = 4, amplitude = 50 }]
[march]
end_time = 200
[output]
pictures = false
snapshot_every = 50
"""
FIELDS = ["temperature", "viscosity", "speed", "strain-rate", "stress"]


def png_size(path):
    """Width, height and pixels a metre."""
    with open(path, "rb") as file:
        head = file.read(64)
    assert head[:8] == b"\x89PNG\r\n\x1a\n", path
    at = head.find(b"pHYs")
    return (*struct.unpack(">II", head[16:24]), struct.unpack(">I", head[at + 4 : at + 8])[0] if at > 0 else 0)


def march(scratch, name="body"):
    folder = scratch.path(name)
    if not os.path.exists(folder):
        runs.expect(runs.run("march", scratch.write("body.toml", BODY), "--into", folder), runs.DONE)
    return folder


def figure(*arguments, **options):
    return runs.expect(runs.run("figure", *arguments, **options), runs.DONE)


def refuse(*arguments, says, code=runs.BAD_INPUT, **options):
    result = runs.expect(runs.run("figure", *arguments, **options), code)
    assert all(part in result.err for part in says), result
    assert result.err.count("lidwright: ") == 1 and not result.out, result


def draws_all_that_a_march_has(scratch):
    folder = march(scratch)
    result = figure(folder)
    names = [f"{kind}_0004.png" for kind in FIELDS] + ["profiles_0004.png", "history.png"]
    assert result.out.split() == [os.path.join(folder, "figures", name) for name in names], result
    for name in names:
        width, _, metre = png_size(os.path.join(folder, "figures", name))
        assert width == 1004 and metre == 11811, name  # 85 mm at 300 dots an inch
    runs.expect_no_leftovers(folder)
    runs.expect(runs.run("regime", folder), runs.DONE)


def sizes_and_formats(scratch):
    folder = march(scratch)
    for size, width, height in (("two-column", 2126, None), ("slide", 1920, 1080)):
        into = scratch.path(size)
        figure(folder, "stress", "history", "--size", size, "--into", into)
        for name in ("stress_0004.png", "history.png"):
            found = png_size(os.path.join(into, name))
            assert found[0] == width and height in (None, found[1]), found
    overlays = ("--with", "flow-lines,arrows,lid,isotherms")
    figure(folder, "temperature", "--format", "svg", "--into", scratch.path("svg"), *overlays)
    svg = xml.etree.ElementTree.parse(scratch.path("svg", "temperature_0004.svg")).getroot()
    assert svg.tag.endswith("svg") and svg.get("width").startswith("240.9"), svg.attrib
    figure(folder, "temperature", "--format", "pdf", "--into", scratch.path("pdf"), *overlays)
    with open(scratch.path("pdf", "temperature_0004.pdf"), "rb") as file:
        pdf = file.read()
    assert pdf.startswith(b"%PDF-") and pdf.rstrip().endswith(b"%%EOF") and b"CreationDate" not in pdf
    fonts, embedded = pdf.count(b"/Type /Font\n"), len(re.findall(rb"/FontFile\d? ", pdf))
    assert 0 < embedded and fonts >= embedded, (fonts, embedded)
    # The same run, the same bytes.
    for kind in ("svg", "pdf", "png"):
        for into in ("once", "twice"):
            figure(folder, "temperature", "--format", kind, "--into", scratch.path(into), *overlays)
        name = f"temperature_0004.{kind}"
        assert runs.digest(scratch.path("once", name)) == runs.digest(scratch.path("twice", name)), kind


def chooses_a_snapshot(scratch):
    folder = march(scratch)
    into = ("--into", scratch.path("chosen"))
    out = figure(folder, "speed", "--at", "110", *into).out
    assert "snapshot 2, time " in out and " Myr, is nearest to 110" in out and "speed_0002.png" in out, out
    assert "speed_0000.png" in figure(folder, "speed", "--at", "snapshot:0", *into).out
    whole = figure(folder, "temperature", "--range", "230:1630", *into).out.split()[0]
    narrow = figure(folder, "temperature", "--range", "900:1000", "--into", scratch.path("narrow")).out.split()[0]
    assert runs.digest(whole) != runs.digest(narrow)


def replaces_only_when_asked(scratch):
    folder = march(scratch)
    path = os.path.join(folder, "figures", "stress_0004.png")
    before = runs.digest(path)
    with open(path, "ab") as file:
        file.write(b"mine")
    refuse(folder, "speed", "stress", says=["speed_0004.png", "--overwrite", "--into"])
    assert runs.digest(path) != before
    figure(folder, "stress", "--overwrite")
    assert runs.digest(path) == before


def no_ffmpeg(scratch):
    """A PATH on which there is nothing."""
    empty = scratch.path("empty")
    os.makedirs(empty, exist_ok=True)
    return {"PATH": empty}


def films(scratch):
    folder = march(scratch)
    into = scratch.path("film")
    arguments = (folder, "temperature", "--film", "--with", "lid,flow-lines", "--into", into)
    result = figure(*arguments, "--progress", environment=no_ffmpeg(scratch))
    assert "no video" in result.out and "ffmpeg" in result.out and "5 pictures" in result.out, result
    frames = [f"film_temperature/frame_{n:04}.png" for n in range(5)]
    assert runs.files(into) == frames
    assert {png_size(os.path.join(into, frame))[:2] for frame in frames} == {(1920, 1080)}
    assert "snapshot 1 of 5" in result.err, result
    refuse(*arguments, says=["film_temperature", "--overwrite"], environment=no_ffmpeg(scratch))
    if not shutil.which("ffmpeg"):
        print("films: ffmpeg is not there, so the video is not tested here")
        return
    # An odd width; a longer film was there before.
    shutil.copy(os.path.join(into, frames[0]), os.path.join(into, "film_temperature", "frame_0005.png"))
    result = figure(*arguments, "--overwrite", "--size", "one-column")
    video = os.path.join(into, "film_temperature.mp4")
    assert result.out.splitlines()[-1] == video and runs.files(into) == ["film_temperature.mp4", *sorted(frames)], result
    assert len({png_size(os.path.join(into, frame)) for frame in frames}) == 1
    with open(video, "rb") as file:
        assert file.read(12)[4:8] == b"ftyp"


def settled_states(scratch):
    folder = scratch.path("states")
    case = scratch.write("box.toml", runs.SETTLING_BOX + "[output]\npictures = false\n")
    runs.expect(runs.run("settle", case, "--into", folder, "--along", "numbers.rayleigh=1e4:2e4:2"), runs.DONE)
    out = figure(folder).out
    assert "branch.png" in out and "temperature_0001.png" in out and "history" not in out, out
    assert "snapshot 0, steady state 0, is nearest to 0.2" in figure(folder, "speed", "--at", "0.2").out
    refuse(folder, "history", says=["no history", "only a march", "branch"])
    refuse(folder, "speed", "--with", "lid", "--overwrite", says=["--with lid", "history of a march"])


def on_two_ranks(scratch):
    folder = march(scratch)
    one, two = scratch.path("one"), scratch.path("two")
    figure(folder, "speed", "--into", one)
    figure(folder, "speed", "--into", two, ranks=2)
    assert runs.digest(os.path.join(one, "speed_0004.png")) == runs.digest(os.path.join(two, "speed_0004.png"))
    result = runs.run("figure", folder, "sped", ranks=2)
    assert result.code == runs.BAD_INPUT and result.err.count("did you mean 'speed'") == 1, result


def bad_input(scratch):
    folder = march(scratch)
    hurt = runs.copy(folder, scratch.path("hurt"))
    fields = next(name for name in runs.files(hurt) if re.match(r"fields/fields_0004.*\.vts$", name))
    with open(os.path.join(hurt, fields), "r+b") as file:
        file.truncate(2000)
    before = runs.files(hurt)
    refuse(says=["name a run folder"])
    refuse(scratch.path("nowhere"), says=["nowhere", "no folder"])
    refuse(scratch.name, says=[scratch.name])
    refuse(folder, "temprature", says=["'temprature'", "did you mean 'temperature'"])
    refuse(folder, "--format", "jpg", says=["--format", "'jpg'", "png, svg, pdf"])
    refuse(folder, "--size", "one-colum", says=["did you mean 'one-column'"])
    refuse(folder, "speed", "--with", "arrow", says=["--with", "'arrow'", "did you mean 'arrows'"])
    refuse(folder, "branch", says=["no branch", "settle --along", "it has temperature"])
    refuse(folder, "speed", "--at", "snapshot:5", says=["snapshot:5", "snapshot:0 to snapshot:4"])
    refuse(folder, "speed", "--at", "soon", says=["--at soon", "snapshot:12"])
    refuse(folder, "speed", "--range", "5", says=["--range 5", "LOW:HIGH"])
    refuse(folder, "viscosity", "--range", "0:1e22", "--overwrite", says=["--range 0:1e22", "above 0"])
    refuse(folder, "--range", "0:1", "--overwrite", says=["--range", "one field"])
    refuse(folder, "speed", "--columns", "mobility", says=["--columns", "history"])
    refuse(folder, "history", "--with", "lid", says=["--with", "field"])
    refuse(folder, "--film", says=["--film", "one field"])
    refuse(folder, "speed", "--film", "--at", "3", says=["--film", "--at"])
    refuse(folder, "speed", "--film", "--format", "pdf", says=["--film", "PNG"])
    refuse(hurt, "speed", "--into", scratch.path("none"), says=["fields_0004"])
    assert runs.files(hurt) == before and not os.path.exists(scratch.path("none"))


def cannot_write(scratch):
    folder = march(scratch)
    blocked = scratch.write("blocked", "a file")
    refuse(folder, "speed", "--into", blocked, says=["blocked"], code=runs.NOT_WRITTEN)


CHECKS = (
    draws_all_that_a_march_has,
    sizes_and_formats,
    chooses_a_snapshot,
    replaces_only_when_asked,
    films,
    settled_states,
    on_two_ranks,
    bad_input,
    cannot_write,
)
with runs.Scratch() as scratch_folder:
    for check in CHECKS:
        check(scratch_folder)
        print(f"{check.__name__}: fine", flush=True)
