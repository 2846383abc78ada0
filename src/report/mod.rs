//! Answers as text and files.
