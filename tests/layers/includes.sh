#!/usr/bin/env bash
# The directions in which folders may know each other, and the foreign libraries each may know.
set -euo pipefail
cd "${LIDWRIGHT_SOURCE_DIR:-$(dirname "$0")/../..}"

broken=0

# includes FOLDER: every include line of its sources, as file:line:#include ...
includes() { grep -rnE --include='*.[ch]pp' '^ *# *include' "$1" 2>/dev/null || true; }

# report RULE LINES: counts and shows the lines that break a rule
report() {
  if [[ -z "$2" ]]; then return 0; fi
  printf 'Broken: %s\n%s\n' "$1" "$2"
  broken=$((broken + 1))
}

# only FOLDER ALLOWED...: our own headers are included with their folder, which is one of ALLOWED
only() {
  local folder=$1 rest
  shift
  rest=$(includes "$folder" | grep '"' | grep -vE "\"($(IFS='|'; echo "$*"))/" || true)
  report "$folder may include only from: $*" "$rest"
}

# never FOLDER PATTERN: no include line of FOLDER matches PATTERN
never() { report "$1 must not include <$2>" "$(includes "$1" | grep -E "[<\"]($2)" || true)"; }

only mesh mesh
only physics physics
only solver mesh physics solver
only study mesh physics solver study
only io mesh physics solver study io
only app mesh physics solver study io app

never physics 'petsc|slepc|mpi|hdf5|vtk|toml|CLI'
never mesh 'slepc|hdf5|H5|vtk|toml|CLI'
never solver 'hdf5|H5|vtk|toml|CLI'
never io 'CLI'
never study 'slepc|hdf5|H5|vtk|toml|CLI'
never app 'slepc|vtk|toml|hdf5|H5'

# The cases live in an invented planetary system. Real bodies are known here by the beginning of their
# names' SHA-256 only, so that no name of one stands in the project.
bodies="
19af4cac544f 4046c0daccd1 4c35576f2c58 4e1fadbd8485 4f1c63f9aba8 5fc165254f4f 6a7367ef7970
7bce8b3948f4 8dad5f6a7dd2 a0a6ca091c70 b7c9b5ccd3e3 cc423fd8544c d43a7b01f357 fc30e2a579cd
"
names_of_bodies() {
  local word hash
  grep -ohE '\b[A-Z][a-z]+\b' -r cases README.md | sort -u | while read -r word; do
    hash=$(printf %s "$word" | sha256sum)
    if [[ $bodies =~ ${hash:0:12} ]]; then printf '%s\n' "$word"; fi
  done
}
report 'no real body in cases/ and README.md' "$(names_of_bodies)"

if [[ $broken -gt 0 ]]; then echo "$broken rules broken"; exit 1; fi
echo "All layers are in order."
