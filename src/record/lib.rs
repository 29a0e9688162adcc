//! What is printed: the record of one press.
