"""What goes in, as the trade writes it: air and its water, fuels by analysis, ash, ratios, heating values, mixing."""
