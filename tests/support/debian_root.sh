# Sourced by the scripts that need a Debian 12 of their own, in a folder: tests/viewers/paraview.sh (a package that
# does not go with the build's), tests/package/clean_root.sh (a system on which nothing was installed).
# docs/install.md and DEVELOPERS.md say how to ask for them.

skip() {
  printf 'skipped: %s\n' "$*"
  exit 77
}

mirror=${LIDWRIGHT_DEBIAN_MIRROR:-http://deb.debian.org/debian}

# make_debian_root FOLDER: a minimal Debian 12. It is complete or absent.
make_debian_root() {
  [[ $EUID -eq 0 ]] || skip "making $1 needs root"
  command -v debootstrap >/dev/null || skip "making $1 needs debootstrap (apt-get install debootstrap)"
  printf 'Making a minimal Debian 12 in %s (a minute or more) ...\n' "$1"
  local partial=$1.partial
  rm -rf "$partial"
  debootstrap --variant=minbase bookworm "$partial" "$mirror" >"$partial.log" 2>&1 ||
    { tail -n 20 "$partial.log" >&2; printf 'debootstrap failed; all it said: %s\n' "$partial.log" >&2; exit 1; }
  printf '#!/bin/sh\nexit 101\n' >"$partial/usr/sbin/policy-rc.d"   # no services start in there
  chmod +x "$partial/usr/sbin/policy-rc.d"
  rm -f "$partial.log"
  mv "$partial" "$1"
}

apt_in_root() {   # apt_in_root FOLDER ARGUMENTS...
  local folder=$1
  shift
  chroot "$folder" env LC_ALL=C.UTF-8 DEBIAN_FRONTEND=noninteractive apt-get -qq -o Dpkg::Use-Pty=0 -o Acquire::Retries=3 "$@"
}

# install_in_root FOLDER PACKAGE...
install_in_root() {
  local folder=$1
  shift
  printf 'Installing %s in %s (some minutes) ...\n' "$*" "$folder"
  apt_in_root "$folder" update
  apt_in_root "$folder" install --yes --no-install-recommends "$@" >/dev/null
}
