"""How `python app` comes from a bare Python to a server: the environment, pip's talk, the port, the flags."""
