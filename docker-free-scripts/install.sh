# Sourced by start and test: brings what is missing from Debian's packages and the lock file, and nothing else.

say() { printf '%s\n' "$*" >&2; }

# Writes nothing outside apt's own folders; services that Debian would start are left stopped.
install_packages() {
  local missing=() pair
  for pair in "$@"; do # command:package
    PATH="$PATH:/usr/sbin:/sbin" command -v "${pair%%:*}" >/dev/null 2>&1 || missing+=("${pair##*:}")
  done
  [ ${#missing[@]} -gt 0 ] || return 0
  local as_root=()
  if [ "$(id -u)" -ne 0 ]; then
    if command -v sudo >/dev/null 2>&1 && sudo -n true 2>/dev/null; then
      as_root=(sudo -n)
    else
      say "Missing: ${missing[*]}. As root, run:"
      say "  apt-get update && apt-get install --no-install-recommends ${missing[*]}"
      exit 3
    fi
  fi
  say "Installing from Debian's packages: ${missing[*]}"
  local policy=/usr/sbin/policy-rc.d made_policy=''
  if [ ! -e "$policy" ]; then
    printf '#!/bin/sh\nexit 101\n' | "${as_root[@]}" tee "$policy" >/dev/null
    "${as_root[@]}" chmod 755 "$policy"
    made_policy=yes
  fi
  local result=0
  "${as_root[@]}" apt-get -o DPkg::Lock::Timeout=300 update -qq >&2 &&
    "${as_root[@]}" env DEBIAN_FRONTEND=noninteractive apt-get -o DPkg::Lock::Timeout=300 -o Dpkg::Use-Pty=0 \
      install -y -q --no-install-recommends "${missing[@]}" 2>&1 | grep -E '^(Get:|Setting up|E:)' >&2 || result=$?
  [ -z "$made_policy" ] || "${as_root[@]}" rm -f "$policy"
  for pair in "$@"; do
    PATH="$PATH:/usr/sbin:/sbin" command -v "${pair%%:*}" >/dev/null 2>&1 || { say "${pair##*:} could not be installed (apt-get ended with $result)."; exit 3; }
  done
}

need_node() {
  command -v node >/dev/null 2>&1 || { say 'Node.js 20.19 or newer is needed: https://nodejs.org'; exit 3; }
  node -e 'const [a, b] = process.versions.node.split(".").map(Number); process.exit(a > 20 || (a === 20 && b >= 19) ? 0 : 1)' ||
    { say "Node.js 20.19 or newer is needed; this is $(node --version)."; exit 3; }
}

# The packages of the lock file, when it is not what node_modules was made from.
install_modules() {
  local stamp=node_modules/.farglow-lock now
  now=$(sha256sum package-lock.json | cut -d' ' -f1)
  [ "$(cat "$stamp" 2>/dev/null)" != "$now" ] || return 0
  say 'Installing the packages of package-lock.json (about a minute)'
  # Tools for building are among them, whatever NODE_ENV says.
  npm ci --include=dev --no-audit --no-fund --loglevel=error >&2
  printf '%s' "$now" >"$stamp"
}
