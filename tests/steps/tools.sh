# Sourced by tests/run.sh: installs what the steps use, into tests/.venv (left out of the repository).
venv=tests/.venv

install_tools() {
    for program in curl python3 node:nodejs npm; do
        command -v "${program%:*}" > /dev/null \
            || { apt-get -qq update && apt-get -qq install -y "${program#*:}" > /dev/null; }
    done
    if ! cmp -s tests/steps/requirements.txt "$venv/installed.txt"; then
        rm -rf "$venv"
        python3 -m venv "$venv"
        "$venv/bin/pip" install --quiet --disable-pip-version-check --requirement tests/steps/requirements.txt
        cp tests/steps/requirements.txt "$venv/installed.txt"
    fi
}
