"""What holds two parts together: a declared joint, the bead of a weld, or nothing but being one solid."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field

from xsec_fem.model.section import Joint, Section


@dataclass(frozen=True)
class Connections:
    """What holds the parts together: the joints, and the weld beads by the joint they belong to."""

    joints: tuple[Joint, ...]
    bead_of: Mapping[str, str] = field(default_factory=dict)

    @classmethod
    def of(cls, section: Section) -> Connections:
        """Return those of a section."""
        return cls(section.joints, {part.name: part.bead_of for part in section.parts if part.bead_of is not None})

    def beads(self, joint: Joint) -> set[str]:
        """Return the names of a joint's beads."""
        return {bead for bead, name in self.bead_of.items() if name == joint.name}

    def joint_between(self, pair: Iterable[str]) -> str | None:
        """Return the joint that claims a pair of parts, or whose bead one of them is; None when they are one solid."""
        names = set(pair)
        for joint in self.joints:
            one, other = ({*side, *self.beads(joint)} for side in (joint.first, joint.second))
            if names & one and names & other and names <= one | other:
                return joint.name
        return None
