"""Process, material and hardware profiles: load and look up."""
