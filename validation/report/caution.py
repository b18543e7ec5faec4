"""The caution that stands on every report, sheet and page."""

CAUTION = (
    "Screening aid - requires review by a competent person. Ferrule compares the figures that a list states with "
    "each other and with published rules, each named with its edition; it does not inspect equipment, classify "
    "areas or replace a certificate, a control drawing, the local code, the authority having jurisdiction or the "
    "judgement of a competent or licensed person. A blank is never a pass: what could not be checked is listed."
)
