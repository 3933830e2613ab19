"""Which system package brings each library that the gmsh wheel loads, by Linux distribution, and the command to install them.

The names of the Debian packages were looked up in its archive; those of the other distributions are from memory.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

GMSH_LIBRARIES = (
    "libGLU.so.1", "libGL.so.1", "libXrender.so.1", "libXcursor.so.1", "libXfixes.so.3", "libXext.so.6", "libXft.so.2",
    "libfontconfig.so.1", "libXinerama.so.1", "libX11.so.6", "libgomp.so.1",
)  # fmt: skip


@dataclass(frozen=True)
class Installer:
    """A package manager: the shell command before the packages' names, and the packages in the order of GMSH_LIBRARIES."""

    command: str
    packages: tuple[str, ...]

    def line(self, libraries: Sequence[str], prefix: str) -> str:
        """Return the one shell line that installs the packages of these libraries; `prefix` is "sudo " or ""."""
        names = dict(zip(GMSH_LIBRARIES, self.packages, strict=True))
        wanted = list(dict.fromkeys(names[library] for library in libraries))
        return f"{self.command.format(sudo=prefix)} {' '.join(wanted)}"


_DEBIAN = Installer(
    "{sudo}apt-get update && {sudo}apt-get install -y --no-install-recommends",
    ("libglu1-mesa", "libgl1", "libxrender1", "libxcursor1", "libxfixes3", "libxext6", "libxft2", "libfontconfig1",
     "libxinerama1", "libx11-6", "libgomp1"),
)  # fmt: skip
_FEDORA = Installer(
    "{sudo}dnf install -y",
    ("mesa-libGLU", "libglvnd-glx", "libXrender", "libXcursor", "libXfixes", "libXext", "libXft", "fontconfig",
     "libXinerama", "libX11", "libgomp"),
)  # fmt: skip
_ARCH = Installer(
    "{sudo}pacman -Sy --needed --noconfirm",
    ("glu", "libglvnd", "libxrender", "libxcursor", "libxfixes", "libxext", "libxft", "fontconfig", "libxinerama",
     "libx11", "gcc-libs"),
)  # fmt: skip
_SUSE = Installer(
    "{sudo}zypper --non-interactive install",
    ("libGLU1", "libglvnd", "libXrender1", "libXcursor1", "libXfixes3", "libXext6", "libXft2", "fontconfig", "libXinerama1",
     "libX11-6", "libgomp1"),
)  # fmt: skip
_ALPINE = Installer(
    "{sudo}apk add",
    ("glu", "mesa-gl", "libxrender", "libxcursor", "libxfixes", "libxext", "libxft", "fontconfig", "libxinerama",
     "libx11", "libgomp"),
)  # fmt: skip

INSTALLERS = {
    "debian": _DEBIAN, "ubuntu": _DEBIAN, "fedora": _FEDORA, "rhel": _FEDORA, "centos": _FEDORA, "arch": _ARCH,
    "suse": _SUSE, "opensuse": _SUSE, "opensuse-leap": _SUSE, "opensuse-tumbleweed": _SUSE, "alpine": _ALPINE,
}  # fmt: skip


def read_os_release(text: str) -> dict[str, str]:
    """Return the keys and values of an /etc/os-release file, quotes taken off."""
    pairs = (line.split("=", 1) for line in text.splitlines() if "=" in line and not line.startswith("#"))
    return {key.strip(): value.strip().strip("\"'") for key, value in pairs}


def installer_for(release: Mapping[str, str]) -> Installer | None:
    """Return the package manager of the system that ID and then ID_LIKE name; None when it is not known."""
    words = [release.get("ID", ""), *release.get("ID_LIKE", "").split()]
    return next((INSTALLERS[word] for word in words if word in INSTALLERS), None)
