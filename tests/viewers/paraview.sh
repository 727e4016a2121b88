#!/usr/bin/env bash
# Opens run folders in ParaView's own batch interpreter and checks what it shows, as vtk_reader.py does with VTK's
# readers. ParaView's Python package of Debian 12 cannot stand beside libvtk9-dev, which the build needs: so it lives
# in a root of its own, outside the repository. It is made only on demand, since that loads several hundred MB:
#
#   LIDWRIGHT_VIEWER_ROOT_MAKE=1 tests/viewers/paraview.sh build/release/lidwright     (as root, some minutes)
#
# Without that root, or without the right to enter it, the test is skipped (77).
set -euo pipefail
program=$(realpath "${1:-${LIDWRIGHT_PROGRAM:?path of the program}}")
root=${LIDWRIGHT_VIEWER_ROOT:-/var/tmp/lidwright_viewer_root}
support=$(realpath "$(dirname "${BASH_SOURCE[0]}")/../support")
source "$support/debian_root.sh"

if [[ ! -x $root/usr/bin/pvpython && -n ${LIDWRIGHT_VIEWER_ROOT_MAKE:-} ]]; then
  [[ -d $root ]] || make_debian_root "$root"
  install_in_root "$root" paraview python3-paraview
fi
[[ -x $root/usr/bin/pvpython ]] ||
  skip "no ParaView in $root; as root, with a network, make it with: LIDWRIGHT_VIEWER_ROOT_MAKE=1 $0 $program"
[[ $EUID -eq 0 ]] || skip "entering $root needs root"
/usr/bin/python3 -c 'import numpy' 2>/dev/null || skip "package python3-numpy is missing"

scratch=$(mktemp --directory "$root/tmp/lidwright_viewer.XXXXXX")   # ParaView sees it as /tmp/...
trap 'rm -rf "$scratch"' EXIT
cp -r "$support/python" "$scratch/python"
mkdir "$scratch/runs"
/usr/bin/python3 "$support/python/viewer_runs.py" "$program" make "$scratch/runs"
inside=${scratch#"$root"}
runs=()
for run in "$scratch"/runs/*/; do runs+=("$inside/runs/$(basename "$run")"); done
chroot "$root" env LC_ALL=C.UTF-8 HOME=/tmp pvpython "$inside/python/paraview_arrays.py" "${runs[@]}"
/usr/bin/python3 "$support/python/viewer_runs.py" "$program" check "$scratch/runs"
