"""The rules, one module a family; every module here is found by itself."""
