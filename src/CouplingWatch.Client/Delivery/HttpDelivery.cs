using System.Net;
using System.Net.Http.Json;
using System.Text.Json;
using CouplingWatch.Client.Buffering;
using CouplingWatch.Wire;

namespace CouplingWatch.Client.Delivery;

/// <summary>Posts records to a server and reads its answers.</summary>
internal sealed class HttpDelivery : IDelivery
{
    private readonly HttpClient http;
    private readonly Uri records;
    private readonly Uri settings;
    private readonly TimeSpan timeout;
    private readonly TimeProvider time;

    public HttpDelivery(Uri server, string run, string? instance, RunSenderOptions options)
    {
        http = options.Handler is { } handler ? new HttpClient(handler, disposeHandler: false) : new HttpClient(new SocketsHttpHandler { PooledConnectionLifetime = TimeSpan.FromMinutes(5) });
        http.Timeout = Timeout.InfiniteTimeSpan;
        var root = new Uri(server.AbsoluteUri.TrimEnd('/') + "/");
        records = new Uri(root, instance is null ? $"api/runs/{run}/records" : $"api/runs/{run}/records?instance={Uri.EscapeDataString(instance)}");
        settings = new Uri(root, $"api/runs/{run}/settings");
        timeout = options.AnswerTimeout;
        time = options.Time;
    }

    public async Task<DeliveryAnswer> DeliverAsync(IReadOnlyList<Pending> batch, byte[]? beat, CancellationToken cancel)
    {
        using var limit = new CancellationTokenSource(timeout, time);
        using var either = CancellationTokenSource.CreateLinkedTokenSource(cancel, limit.Token);
        try
        {
            using var content = new LinesContent(batch, beat);
            using var response = await http.PostAsync(records, content, either.Token).ConfigureAwait(false);
            var body = await ReadBodyAsync(response, either.Token).ConfigureAwait(false);
            return response.IsSuccessStatusCode
                ? new DeliveryAnswer(DeliveryOutcome.Accepted, body.Next, body.Revision)
                : Explain(response, body, batch);
        }
        catch (OperationCanceledException) when (!cancel.IsCancellationRequested)
        {
            return new DeliveryAnswer(DeliveryOutcome.Later, Why: $"no answer within {timeout.TotalSeconds:0.#} s");
        }
        catch (HttpRequestException thrown)
        {
            return new DeliveryAnswer(DeliveryOutcome.Later, Why: thrown.Message);
        }
        catch (IOException thrown)
        {
            return new DeliveryAnswer(DeliveryOutcome.Later, Why: thrown.Message);
        }
    }

    public async Task<SettingsRevision?> ReadSettingsAsync(CancellationToken cancel)
    {
        using var limit = new CancellationTokenSource(timeout, time);
        using var either = CancellationTokenSource.CreateLinkedTokenSource(cancel, limit.Token);
        try
        {
            return await http.GetFromJsonAsync<SettingsRevision>(settings, WireJson.Options, either.Token).ConfigureAwait(false);
        }
        catch (Exception thrown) when (thrown is HttpRequestException or IOException or JsonException || (thrown is OperationCanceledException && !cancel.IsCancellationRequested))
        {
            return null;
        }
    }

    public ValueTask DisposeAsync()
    {
        http.Dispose();
        return ValueTask.CompletedTask;
    }

    private DeliveryAnswer Explain(HttpResponseMessage response, Body body, IReadOnlyList<Pending> batch)
    {
        var why = $"{(int)response.StatusCode} {body.Detail ?? body.Title ?? response.ReasonPhrase}";
        var after = response.Headers.RetryAfter switch
        {
            { Delta: { } delta } => delta,
            { Date: { } date } => date - time.GetUtcNow(),
            _ => (TimeSpan?)null,
        };
        var seq = body.Seq ?? (body.Line is { } line && line >= 1 && line <= batch.Count ? batch[(int)line - 1].Seq : null);
        var outcome = (response.StatusCode, body.Fault) switch
        {
            (HttpStatusCode.BadRequest, _) => DeliveryOutcome.Refused,
            (HttpStatusCode.Conflict, "seq-gap") => DeliveryOutcome.Gap,
            (HttpStatusCode.Conflict, "seq-conflict") => DeliveryOutcome.Conflict,
            (HttpStatusCode.Conflict, "run-exists" or "run-closed") => DeliveryOutcome.Never,
            (HttpStatusCode.RequestEntityTooLarge, _) => DeliveryOutcome.TooLarge,
            _ => DeliveryOutcome.Later,
        };
        return new DeliveryAnswer(outcome, body.Next, body.Revision, seq, after, why);
    }

    private static async Task<Body> ReadBodyAsync(HttpResponseMessage response, CancellationToken cancel)
    {
        try
        {
            return await response.Content.ReadFromJsonAsync<Body>(WireJson.Options, cancel).ConfigureAwait(false) ?? new Body();
        }
        catch (JsonException)
        {
            return new Body();
        }
    }

    /// <summary>What an answer or a problem detail may hold of use here.</summary>
    private sealed record Body
    {
        public long? Next { get; init; }

        public int? Revision { get; init; }

        public string? Type { get; init; }

        public string? Title { get; init; }

        public string? Detail { get; init; }

        public long? Line { get; init; }

        public long? Seq { get; init; }

        /// <summary>Last part of the problem type, such as <c>seq-gap</c>.</summary>
        public string? Fault => Type?[(Type.LastIndexOfAny(['/', ':', '#']) + 1)..];
    }
}
