namespace CouplingWatch.Components.Campaign;

/// <summary>Keeps the names beside the dots of a plot apart. Pure; O(n²) for the few dots of a campaign.</summary>
public static class LabelPlaces
{
    /// <summary>Places for labels at the given heights: as near as possible, at least <paramref name="apart"/> from each other where their dots stand close, in the order of the dots.</summary>
    /// <param name="dots">Place along the axis and wished height of each.</param>
    public static double[] Spread(IReadOnlyList<(double X, double Y)> dots, double closeX, double apart)
    {
        ArgumentNullException.ThrowIfNull(dots);
        var places = dots.Select(d => d.Y).ToArray();
        var left = Enumerable.Range(0, dots.Count).OrderBy(i => dots[i].X).ToList();
        while (left.Count > 0)
        {
            var first = dots[left[0]].X;
            var cluster = left.Where(i => dots[i].X - first <= closeX).OrderBy(i => dots[i].Y).ToList();
            left.RemoveAll(cluster.Contains);
            for (var k = 1; k < cluster.Count; k++) places[cluster[k]] = Math.Max(places[cluster[k]], places[cluster[k - 1]] + apart);
            // Pushed down too far: move each run of touching labels up by half of what its last was moved.
            var start = 0;
            for (var k = 1; k <= cluster.Count; k++)
            {
                if (k < cluster.Count && places[cluster[k]] - places[cluster[k - 1]] <= apart + 1e-9) continue;
                var shift = (places[cluster[k - 1]] - dots[cluster[k - 1]].Y) / 2;
                var room = start == 0 ? double.PositiveInfinity : places[cluster[start]] - places[cluster[start - 1]] - apart;
                for (var j = start; j < k; j++) places[cluster[j]] -= Math.Min(shift, Math.Max(0, room));
                start = k;
            }
        }
        return places;
    }
}
