"""The door for HTTP: operations, strict reading, problem documents, limits. No physics, no sizing rule."""
