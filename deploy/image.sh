#!/bin/sh
# Builds the image of the service from the source in this folder:
#
#   sh deploy/image.sh [TAG]        default localhost/loopslack:dev
#
# The network is only used beforehand, to fetch Debian packages and wheels that the requirement files pin by hash;
# the build itself runs without one. Needs mmdebstrap, buildah and Python 3.11 or later.
set -eu
cd "$(dirname "$0")/.."
. deploy/environment.sh

tag=${1:-localhost/loopslack:dev}
python_of_release=3.13
for tool in mmdebstrap buildah; do
    command -v "$tool" >/dev/null 2>&1 || fail "Missing tool: $tool. On Debian: apt-get install $tool"
done
find_python

bases=.cache/container/bases
recipe=$(cksum <deploy/base-images.sh)
if [ "$(cat "$bases/recipe" 2>/dev/null)" != "$recipe" ]; then
    say "Making the base images."
    sh deploy/base-images.sh "$bases"
    for image in runtime build; do
        container=$(buildah from scratch)
        buildah add --quiet "$container" "$bases/$image.tar" / >/dev/null
        buildah commit --quiet --format docker "$container" "localhost/loopslack-$image:trixie" >/dev/null
        buildah rm "$container" >/dev/null
    done
    printf '%s\n' "$recipe" >"$bases/recipe"
fi

wheels=.cache/container/wheels
pins=$(cat deploy/requirements.txt deploy/speed-requirements.txt | cksum)
if [ "$(cat "$wheels/pins" 2>/dev/null)" != "$pins" ]; then
    say "Fetching the pinned wheels."
    rm -rf "$wheels"
    make_environment .cache/container/fetch
    machine=$(uname -m)
    platforms=""
    for glibc in 2014 _2_5 _2_12 _2_17 _2_24 _2_27 _2_28 _2_34 _2_39; do
        platforms="$platforms --platform manylinux${glibc}_$machine"
    done
    # A list of options without blanks in them:
    # shellcheck disable=SC2086
    .cache/container/fetch/bin/python -m pip download -qq --require-hashes --no-deps --only-binary :all: \
        --python-version "$python_of_release" --implementation cp $platforms \
        --dest "$wheels" --requirement deploy/requirements.txt
    .cache/container/fetch/bin/python -m pip install -qq --upgrade --no-deps --no-index \
        --find-links "$wheels" setuptools
    .cache/container/fetch/bin/python -m pip download -qq --require-hashes --no-deps --no-build-isolation \
        --dest "$wheels" --requirement deploy/speed-requirements.txt
    printf '%s\n' "$pins" >"$wheels/pins"
fi

revision=$(git rev-parse HEAD 2>/dev/null || echo unknown)
version=$(sed -n 's/^__version__ = "\(.*\)"$/\1/p' service/loopslack/__init__.py)
say "Building $tag, version $version, revision $revision."
buildah build --quiet --layers --format docker --isolation oci --runtime "$(command -v runc || command -v crun)" --network none \
    --file deploy/Containerfile --ignorefile deploy/.containerignore \
    --build-arg PIP_NO_INDEX=1 --build-arg PIP_FIND_LINKS=/wheels --volume "$PWD/$wheels:/wheels:ro" \
    --build-arg VERSION="$version" --build-arg REVISION="$revision" --timestamp 0 --tag "$tag" . >/dev/null
say "Built $tag."
