"""From the unit file to the signed record: inputs, assessment, run, record, signature, comparison."""
