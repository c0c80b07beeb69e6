#!/bin/sh
# Makes the two base images of deploy/Containerfile from Debian packages alone, without a registry of images:
#
#   sh deploy/base-images.sh FOLDER     writes FOLDER/runtime.tar (30 packages, no shell) and FOLDER/build.tar
#
# The packages come from the Debian release named here, checked against the archive's signatures. They are only
# unpacked: nothing of them runs, and only what Python needs is there. Needs mmdebstrap.
set -eu

# What a package manager would have written: the list of what is in the image (scanners and the bill of materials
# read it) and the one user it runs as. Documentation goes, licences stay.
if [ "$1" = --finish ]; then
    cd "$2"
    for archive in var/cache/apt/archives/*.deb; do
        dpkg-deb --field "$archive" | sed '/^Package:/a Status: install ok installed'
        echo
    done >>var/lib/dpkg/status
    printf '%s\n' root:x:0:0::/nonexistent:/usr/sbin/nologin \
        loopslack:x:10001:10001::/nonexistent:/usr/sbin/nologin >etc/passwd
    printf '%s\n' root:x:0: loopslack:x:10001: >etc/group
    if [ -d usr/share/ca-certificates ]; then
        find usr/share/ca-certificates -name '*.crt' -exec cat {} + >etc/ssl/certs/ca-certificates.crt
    fi
    rm -rf usr/share/man usr/share/locale
    find usr/share/doc -type f ! -name copyright -delete
    exit
fi

release=trixie
runtime=base-files,libpython3-stdlib,netbase,python3-minimal
build=ca-certificates,gcc,libc6-dev,python3-dev,python3-venv
folder=$1

# make NAME PACKAGES
make() {
    mmdebstrap --quiet --variant=extract --include="$2" --extract-hook="sh '$0' --finish \"\$1\"" \
        "$release" "$folder/$1.part.tar"
    rm -rf "$folder/$1.tar" # a folder of this name would swallow the file
    mv "$folder/$1.part.tar" "$folder/$1.tar"
}

mkdir -p "$folder"
make runtime "$runtime"
make build "$runtime,$build"
