"""Where nothing can be written: a read-only file system, and a disk that is full. Mounted by the test, in a namespace of
its own, so that nothing is left behind; skipped where that is not permitted."""

import os
import subprocess
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

CASE = runs.LID.replace("most_steps = 200", "most_steps = 60")
DISK = 500  # KB; the run below needs more


def in_own_namespace():
    """Starts this script once more where it may mount what it likes."""
    if os.environ.get("LIDWRIGHT_OWN_MOUNTS"):
        return
    trial = subprocess.run(["unshare", "-m", "sh", "-c", "mount -t tmpfs none /mnt"], capture_output=True, check=False)
    if trial.returncode != 0:
        runs.skip(f"no mounts here: {trial.stderr.decode().strip()}")
    os.environ["LIDWRIGHT_OWN_MOUNTS"] = "1"
    os.execvp("unshare", ["unshare", "-m", sys.executable, *sys.argv])


def mounted(scratch, name, options):
    folder = scratch.path(name)
    os.mkdir(folder)
    subprocess.run(["mount", "-t", "tmpfs", "-o", options, "none", folder], check=True)
    return folder


def expect_message(result, *words):
    runs.expect(result, runs.NOT_WRITTEN)
    assert result.out == "", result
    assert result.err.startswith("lidwright: cannot write ") and len(result.err.splitlines()) == 1, result
    for word in words:
        assert word in result.err, (word, result)


def read_only(scratch, ranks):
    folder = mounted(scratch, f"read_only_{ranks}", "ro")
    result = runs.run("march", scratch.path("lid.toml"), "--into", folder + "/run", ranks=ranks)
    expect_message(result, folder, "Read-only file system", "write into another folder")
    assert runs.files(folder) == []
    subprocess.run(["umount", folder], check=True)


def run_on_read_only_disk(scratch):
    """A finished run on a disk that became read-only is neither resumed nor overwritten, and stays as it is."""
    folder = mounted(scratch, "archive", "size=20m")
    few = ["--set", "march.most_steps=3"]
    runs.expect(runs.run("march", scratch.path("lid.toml"), "--into", folder + "/run", *few), runs.DONE)
    subprocess.run(["mount", "-o", "remount,ro", folder], check=True)
    before = runs.results(folder + "/run")
    more = ["--set", "march.most_steps=6"]
    expect_message(runs.run("march", "--resume", folder + "/run", *more), folder, "Read-only")
    again = ["march", scratch.path("lid.toml"), "--into", folder + "/run", "--overwrite"]
    expect_message(runs.run(*again), folder, "Read-only")
    assert runs.results(folder + "/run") == before
    subprocess.run(["umount", folder], check=True)


def full_disk(scratch, ranks):
    """The run stops with a message and goes on when there is space again."""
    reference = scratch.path(f"reference_{ranks}")
    case = scratch.path("lid.toml")
    runs.expect(runs.run("march", case, "--into", reference, ranks=ranks), runs.DONE)

    disk = mounted(scratch, f"disk_{ranks}", f"size={DISK}k")
    folder = os.path.join(disk, "run")
    expect_message(
        runs.run("march", case, "--into", folder, ranks=ranks), folder, "No space left on device", "free space on that disk"
    )
    runs.expect_no_leftovers(folder)
    assert runs.checkpoints(folder), "it should have come this far; make DISK larger"
    for name in runs.files(folder):
        if name.endswith((".vts", ".pvts", ".vtp", ".pvd")):
            assert runs.read(os.path.join(folder, name)).rstrip().endswith("</VTKFile>"), name
    runs.columns(folder)  # every row is whole

    # Still full: the same answer, and nothing lost.
    kept = runs.checkpoints(folder)
    expect_message(runs.run("march", "--resume", folder, ranks=ranks), disk, "No space left on device")
    assert runs.checkpoints(folder)[0] in kept

    subprocess.run(["mount", "-o", "remount,size=50m", disk], check=True)
    runs.expect(runs.run("march", "--resume", folder, ranks=ranks), runs.DONE)
    runs.expect_same_run(folder, reference)
    runs.expect_no_leftovers(folder)
    subprocess.run(["umount", disk], check=True)


def full_from_the_start(scratch):
    """Not even the first file fits: nothing is left behind."""
    disk = mounted(scratch, "full", "size=64k")
    with open(os.path.join(disk, "ballast"), "wb") as file:
        try:
            file.write(b"x" * 65536)
        except OSError:
            pass
    result = runs.run("march", scratch.path("lid.toml"), "--into", disk + "/run")
    expect_message(result, disk, "No space left on device")
    assert runs.files(disk) == ["ballast"], runs.files(disk)
    subprocess.run(["umount", disk], check=True)


in_own_namespace()
with runs.Scratch(ignore_cleanup_errors=True) as scratch_folder:
    scratch_folder.write("lid.toml", CASE)
    for action, arguments in (
        (read_only, (1,)),
        (read_only, (2,)),
        (run_on_read_only_disk, ()),
        (full_from_the_start, ()),
        (full_disk, (1,)),
        (full_disk, (2,)),
    ):
        action(scratch_folder, *arguments)
        print(f"{action.__name__}{arguments}: fine", flush=True)
