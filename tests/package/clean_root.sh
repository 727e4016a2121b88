#!/usr/bin/env bash
# Installs the Debian package in a Debian 12 on which nothing else is, tries what a user does first, and removes it
# again. It loads some hundred MB, so it runs only when asked to, as root and with a network:
#
#   ./dev package
#   LIDWRIGHT_PACKAGE=build/package/lidwright_0.1.0-1_amd64.deb tests/package/clean_root.sh
#
# Else the test is skipped (77). LIDWRIGHT_PACKAGE_ROOT: where the minimal system is kept; each test works on a copy.
set -euo pipefail
source "$(dirname "${BASH_SOURCE[0]}")/../support/debian_root.sh"
[[ -n ${LIDWRIGHT_PACKAGE:-} ]] ||
  skip "no package named; as root, with a network: ./dev package && LIDWRIGHT_PACKAGE=build/package/NAME.deb $0"
[[ $EUID -eq 0 ]] || skip "a root of its own needs root"
package=$(realpath "$LIDWRIGHT_PACKAGE")
base=${LIDWRIGHT_PACKAGE_ROOT:-/var/tmp/lidwright_package_root}
root=$base.test

[[ -d $base ]] || make_debian_root "$base"
leave() {
  mountpoint -q "$root/proc" && umount "$root/proc"
  rm -rf --one-file-system "$root"
}
trap leave EXIT
leave
cp -a "$base" "$root"
mount -t proc proc "$root/proc"   # the program looks there for its own place

inside() { chroot "$root" env -i PATH=/usr/bin:/bin:/usr/sbin:/sbin LC_ALL=C.UTF-8 HOME=/root HWLOC_HIDE_ERRORS=2 DEBIAN_FRONTEND=noninteractive "$@"; }
step() { printf '\n== %s\n' "$*"; }
files() { (cd "$root" && find etc opt usr var/lib/lidwright* -name '*lidwright*' 2>/dev/null | grep -v '^var/lib/dpkg' || true); }

step "install"
apt_in_root "$root" update
cp "$package" "$root/tmp/lidwright.deb"
apt_in_root "$root" install --yes --no-install-recommends /tmp/lidwright.deb >"$base.log" 2>&1 || { tail -n 30 "$base.log"; exit 1; }
inside dpkg-query --show --showformat='${Package} ${Version} ${Architecture}, ${Installed-Size} kB; needs ${Depends}\n' lidwright
inside dpkg-query --show | wc -l | sed 's/$/ packages on the system/'

step "run, from an installed example"
inside lidwright --version
inside lidwright march /usr/share/doc/lidwright/examples/isoviscous_annulus.toml --set march.most_steps=5 --into /tmp/run
for file in history.csv fields.pvd summary.toml pictures/picture_0000.png; do [[ -s $root/tmp/run/$file ]] || { echo "no $file"; exit 1; }; done
inside lidwright regime /tmp/run | head -n 2

step "verify"
inside lidwright verify stokes_annulus | tail -n 5

step "manual pages and completions"
for verb in "" -check -march -settle -onset -regime -figure -report -verify -keys -completions -manual; do
  inside zcat "/usr/share/man/man1/lidwright$verb.1.gz" | grep -q '^\.SH SYNOPSIS'
done
for file in bash-completion/completions/lidwright zsh/site-functions/_lidwright fish/vendor_completions.d/lidwright.fish \
  doc/lidwright/copyright doc/lidwright/changelog.gz doc/lidwright/docs/case.md lidwright/benchmarks/stokes_annulus/benchmark.toml; do
  [[ -s $root/usr/share/$file ]] || { echo "no /usr/share/$file"; exit 1; }
done
inside bash -c 'source /usr/share/bash-completion/completions/lidwright
  COMP_WORDS=(lidwright ma); COMP_CWORD=1; _lidwright; echo "lidwright ma: ${COMPREPLY[*]}"'

step "several ranks, with the package that is recommended"
apt_in_root "$root" install --yes --no-install-recommends openmpi-bin >"$base.log" 2>&1 || { tail -n 30 "$base.log"; exit 1; }
inside env OMPI_ALLOW_RUN_AS_ROOT=1 OMPI_ALLOW_RUN_AS_ROOT_CONFIRM=1 OMPI_MCA_rmaps_base_oversubscribe=1 OMPI_MCA_plm=isolated \
  OMPI_MCA_btl=self,vader mpirun -q -n 2 lidwright march /usr/share/doc/lidwright/examples/isoviscous_annulus.toml \
  --set march.most_steps=3 --into /tmp/run2 | head -n 1

step "remove"
apt_in_root "$root" purge --yes lidwright >>"$base.log" 2>&1
left=$(files)
[[ -z $left ]] || { printf 'left behind:\n%s\n' "$left"; exit 1; }
echo "nothing is left of it"
