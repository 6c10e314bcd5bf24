"""Row loads and secondary bending of a splice."""

from fatigue.joint.faults import joint_faults
from fatigue.joint.layout import JointArrays, Layout, arrays_of, layout_of
from fatigue.joint.model import Joint, compare_flexibilities, solve_joint
from fatigue.joint.variants import Variants, solve_variants

__all__ = [
    "Joint",
    "JointArrays",
    "Layout",
    "Variants",
    "arrays_of",
    "compare_flexibilities",
    "joint_faults",
    "layout_of",
    "solve_joint",
    "solve_variants",
]
