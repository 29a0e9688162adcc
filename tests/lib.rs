//! What is checked: the main job against the outside world.
