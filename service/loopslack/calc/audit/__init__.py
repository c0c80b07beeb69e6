"""An existing vessel with what its gauge shows: what explains the reading, whether it holds, what to set instead."""
