// Replaced by the module's first source.
