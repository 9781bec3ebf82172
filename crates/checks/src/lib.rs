//! From a resolved setup to findings: derived results, one file a rule, mends and tried changes.
