"""Row loads and secondary bending of a splice."""

from fatigue.joint.model import Joint, joint_faults, solve_joint

__all__ = ["Joint", "joint_faults", "solve_joint"]
