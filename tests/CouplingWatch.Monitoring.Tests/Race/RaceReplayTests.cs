using System.Text.Json;
using CouplingWatch.Monitoring.Race;
using CouplingWatch.Wire;
using CsCheck;

namespace CouplingWatch.Monitoring.Tests.Race;

public sealed class RaceReplayTests
{
    /// <summary>After any number of steps a race told the same things again stands exactly where the first one stands, wish included.</summary>
    [Fact]
    public void A_replayed_race_stands_where_the_first_one_stood() =>
        Gen.Select(Gen.Int[0, 120], Gen.Int[0, 3], Gen.Int[1, 6], Gen.Long, Gen.Int[0, 1000]).Sample((steps, delay, challengers, seed, load) =>
        {
            int Count(int step, Records.CouplingSettings settings)
            {
                var noise = new Random(step * 7919 + load).Next(5);
                return settings.HistorySteps!.Value % 4 * 3 + 6 + noise + (noise == 4 && load % 3 == 0 ? settings.HistorySteps.Value * 4 : 0);
            }

            var track = new RaceTrack(Count, delay, challengers, seed: seed);
            for (var i = 0; i < steps; i++) track.OneStep();
            var again = track.Replay();
            Assert.Equal(JsonSerializer.Serialize(track.Race.View(), WireJson.Options), JsonSerializer.Serialize(again.View(), WireJson.Options));
            Assert.Equal(track.Race.Wish?.Arm, again.Wish?.Arm);
        }, iter: 300);

    [Fact]
    public void The_orders_follow_from_the_seed_and_every_order_comes_up()
    {
        var orders = new HashSet<string>();
        for (var seed = 0; seed < 100; seed++)
        {
            var first = new RaceTrack((_, _) => 10, seed: seed).RunToTheEnd().Rounds[0].Order;
            Assert.Equal(first, new RaceTrack((_, _) => 10, seed: seed).RunToTheEnd().Rounds[0].Order);
            orders.Add(string.Join(' ', first));
        }
        Assert.Equal(6, orders.Count);
    }
}
