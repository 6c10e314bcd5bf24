"""What every report must say about the limits of its numbers."""

from __future__ import annotations

CAUTIONS = (
    "These are lives to crack initiation: failure of a small coupon, or a crack about a millimetre long. Crack growth "
    "and residual strength are not estimated.",
    "Damage-tolerance rules (14 CFR 25.571(a)(3)) derive inspection thresholds from crack growth from an assumed flaw. "
    "An initiation life with a factor does not replace that.",
    "US damage-tolerance guidance gives no credit for interference, cold work or clamp-up: thresholds here are taken "
    "from the life without credit unless the case says use_credit = true.",
    "Fretting, corrosion, poor drilling, interaction of cracks at several sites, and bonded or sealed joints are "
    "outside this estimate.",
    "An inspection finds a crack only with a method that can see the face where it starts: a crack on a faying face is "
    "hidden until it is through the sheet.",
    "Use only under the responsible engineer's and authority's approved methods and data.",
)
