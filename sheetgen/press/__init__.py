"""Publishing: the whole old site or the whole new one, never a mix."""
