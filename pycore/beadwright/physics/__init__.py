"""Small pure functions on floats, one subject a module; import the module you need."""
