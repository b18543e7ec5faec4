"""What an audit leaves behind: the exception list, findings.json, the catalogue of rules."""
