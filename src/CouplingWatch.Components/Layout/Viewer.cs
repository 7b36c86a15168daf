using System.Globalization;
using Microsoft.JSInterop;

namespace CouplingWatch.Components.Layout;

/// <summary>What the browser knows of its reader: the time zone, when the board was last looked at, whether keys are on. One instance a circuit.</summary>
public sealed class Viewer(LiveUpdates live) : IAsyncDisposable
{
    private IJSObjectReference? module;
    private DotNetObjectReference<Viewer>? self;

    /// <summary>The reader's zone; UTC until the browser has said.</summary>
    public TimeZoneInfo Zone { get; private set; } = TimeZoneInfo.Utc;

    /// <summary>The end of the visit before this one; null when there was none.</summary>
    public DateTimeOffset? LookedAt { get; private set; }

    /// <summary>The single-letter keys are on (off by default).</summary>
    public bool Keys { get; private set; }

    /// <summary>The browser has answered.</summary>
    public bool Known { get; private set; }

    public event Action? Changed;

    /// <summary>Asks the browser once; later calls do nothing.</summary>
    public async Task LearnAsync(IJSRuntime js)
    {
        ArgumentNullException.ThrowIfNull(js);
        if (module is not null) return;
        try
        {
            module = await js.InvokeAsync<IJSObjectReference>("import", "./js/viewer.js");
            self = DotNetObjectReference.Create(this);
            Take(await module.InvokeAsync<Told?>("begin", self));
        }
        catch (Exception e) when (e is JSException or JSDisconnectedException or OperationCanceledException)
        {
            // Without its script the page still works: times in UTC, no "since you last looked".
        }
        Known = true;
        Changed?.Invoke();
    }

    public async Task SetKeysAsync(bool on)
    {
        Keys = on;
        if (module is not null) await module.InvokeVoidAsync("setKeys", on);
    }

    [JSInvokable]
    public void Hidden(bool hidden) => live.SetHidden(hidden);

    [JSInvokable]
    public void TogglePause()
    {
        if (live.PausedAt is null) live.Pause();
        else live.Resume();
    }

    private void Take(Told? told)
    {
        if (told is null) return;
        if (told.Zone is { Length: > 0 } id && TimeZoneInfo.TryFindSystemTimeZoneById(id, out var zone)) Zone = zone;
        if (DateTimeOffset.TryParse(told.LookedAt, CultureInfo.InvariantCulture, DateTimeStyles.AssumeUniversal, out var looked)) LookedAt = looked;
        Keys = told.Keys;
    }

    public async ValueTask DisposeAsync()
    {
        self?.Dispose();
        if (module is null) return;
        try
        {
            await module.DisposeAsync();
        }
        catch (Exception e) when (e is JSDisconnectedException or JSException or OperationCanceledException)
        {
            // The browser has gone; nothing is left to release.
        }
    }

    /// <summary>The answer of the browser's side.</summary>
    internal sealed record Told(string? Zone, string? LookedAt, bool Keys);
}
