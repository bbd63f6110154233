"""The hosts: the only files that know where a function is called from."""
