"""What stands wherever a result is shown: what it leaves out, and a caution."""

CAUTION = (
    "Heads under tension burst and rims fail: these are estimates that do not replace the "
    "maker's ratings, local codes or licensed practice."
)

NOT_COVERED = (
    "Not in these numbers: the air, unevenness of the head beyond what the study says, and "
    "a rim that gives more than the study says."
)
