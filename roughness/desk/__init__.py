"""What both doors do: open a survey, choose, record, adopt, list, check.

The only room that joins the trail and the method.
"""
