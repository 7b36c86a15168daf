using Bunit;
using CouplingWatch.Components.Feed;
using CouplingWatch.Components.Tests.Hand;
using Microsoft.AspNetCore.Components;
using Microsoft.Extensions.DependencyInjection;
using Microsoft.Extensions.Time.Testing;

namespace CouplingWatch.Components.Tests;

/// <summary>A browser tab by hand: an interactive circuit, a feed and a clock that the test moves.</summary>
public abstract class PageTest : BunitContext
{
    protected PageTest(HandFeed? feed = null)
    {
        Feed = feed ?? HandLock.Feed();
        Services.AddSingleton<IWatchFeed>(Feed);
        Services.AddSingleton<TimeProvider>(Clock);
        Services.AddWatchComponents();
        SetRendererInfo(new RendererInfo("Server", isInteractive: true));
        JSInterop.Mode = JSRuntimeMode.Loose;
    }

    protected HandFeed Feed { get; }

    protected FakeTimeProvider Clock { get; } = new(HandLock.Now);
}
