"""From the model to traces, poles and frequency response; block-diagram algebra."""
