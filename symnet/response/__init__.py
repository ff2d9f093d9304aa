"""What H does: magnitude, phase and delay over frequency."""
